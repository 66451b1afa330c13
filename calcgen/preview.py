"""Serves the package to this machine alone, and reloads its pages when a new build stands."""

from __future__ import annotations

import os
import secrets
import sys
import threading
import time
from collections.abc import Callable
from contextlib import suppress
from dataclasses import dataclass
from html import escape
from http import HTTPStatus
from http.server import BaseHTTPRequestHandler, ThreadingHTTPServer
from pathlib import Path
from socketserver import TCPServer
from typing import Any
from urllib.parse import unquote, urlsplit

HOST = "127.0.0.1"
PORTS_TRIED = 20

_PAUSES = (0.0, 0.01, 0.05)  # seconds before each look for a file: the package may just be being replaced
_BEAT = 10.0  # seconds between signs of life to an open tab
_POLL = 0.02  # seconds until a stop is seen

# Not from the machine's registry, which differs from one to the next.
_TYPES = {
    ".css": "text/css; charset=utf-8",
    ".csv": "text/csv; charset=utf-8",
    ".html": "text/html; charset=utf-8",
    ".jpeg": "image/jpeg",
    ".jpg": "image/jpeg",
    ".js": "text/javascript; charset=utf-8",
    ".json": "application/json",
    ".jsonl": "text/plain; charset=utf-8",
    ".md": "text/plain; charset=utf-8",
    ".png": "image/png",
    ".svg": "image/svg+xml",
    ".toml": "text/plain; charset=utf-8",
    ".txt": "text/plain; charset=utf-8",
    ".woff2": "font/woff2",
    ".zip": "application/zip",
}

# A browser opens six connections to a host at most, and an event stream takes one for good. So of all open
# tabs the one that holds the lock listens, and tells the others.
_SCRIPT = """\
(() => {
  const build = document.currentScript.dataset.build;
  const place = "calcgen-scroll:" + location.pathname;
  let leaving = false;

  const see = (current) => {
    if (leaving || current === build) return;
    leaving = true;
    sessionStorage.setItem(place, JSON.stringify([scrollX, scrollY]));
    location.reload();
  };

  const kept = sessionStorage.getItem(place);
  if (kept !== null) {
    sessionStorage.removeItem(place);
    addEventListener("load", () => scrollTo(...JSON.parse(kept)));
  }

  const channel = new BroadcastChannel("calcgen-preview");
  channel.onmessage = (message) => see(message.data);
  navigator.locks.request("calcgen-preview", () => new Promise(() => {
    const events = new EventSource("/-/events");
    events.onmessage = (event) => {
      channel.postMessage(event.data);
      see(event.data);
    };
  }));

  // Also when the browser brings the page back from its history.
  addEventListener("pageshow", () => fetch("/-/build").then((answer) => answer.text()).then(see, () => {}));
})();
"""

_MISSING = b"""<!doctype html>
<html lang="en"><meta charset="utf-8"><title>Not in the package</title>
<body><p>This page is not in the package. It appears here when a build brings it.
<p><a href="/">Cover</a></body></html>
"""


# It stays in view, and tells by words and a frame: not by colour alone.
_BANNER = (
    "position: sticky; top: 0; z-index: 9; margin: 0; padding: 8px 26px; font: 700 14px/1.4 sans-serif;"
    " color: #fff; background: #8a1538; border: 3px double #fff; overflow-wrap: anywhere"
)


class Preview:
    """A server of one package folder on the loopback interface.

    Parameters
    ----------
    folder : the package; need not exist yet.
    port : the port wanted, 0 for any; if it is taken, the next free one.
    say : takes a line for the user.

    Raises
    ------
    OSError
        When no port is to be had.
    """

    def __init__(self, folder: Path, port: int = 0, *, say: Callable[[str], None] = lambda _: None) -> None:
        self._builds = _Builds()
        self._server = _bind(folder, self._builds, port)
        self.port: int = self._server.server_address[1]
        if port not in (0, self.port):
            say(f"port {port} is not free, so the preview is at {self.url}")
        self._thread = threading.Thread(target=self._server.serve_forever, args=(_POLL,), daemon=True)

    @property
    def url(self) -> str:
        """Address of the cover."""
        return f"http://{HOST}:{self.port}/"

    def start(self) -> None:
        """Serve, in a thread of its own."""
        self._thread.start()

    def announce(self, fault: str = "") -> None:
        """Tell all open pages that a new build stands; with a `fault`, that the old one does and why."""
        self._builds.advance(fault)

    def stop(self) -> None:
        """Stop at once; open event streams end."""
        self._builds.end()
        if self._thread.is_alive():
            self._server.shutdown()
            self._thread.join()
        self._server.server_close()

    def __enter__(self) -> Preview:
        self.start()
        return self

    def __exit__(self, *exception: object) -> None:
        self.stop()


class _Builds:
    """The name of the current build, which event streams wait on."""

    def __init__(self) -> None:
        self._run = secrets.token_hex(4)  # so that a page left open from an earlier run reloads
        self._number = 0
        self._changed = threading.Condition()
        self.fault = ""  # why the package is older than the project
        self.ended = False

    @property
    def current(self) -> str:
        return f"{self._run}-{self._number}"

    def advance(self, fault: str) -> None:
        with self._changed:
            self.fault = fault
            self._number += 1
            self._changed.notify_all()

    def end(self) -> None:
        with self._changed:
            self.ended = True
            self._changed.notify_all()

    def wait(self, seen: str, patience: float) -> str:
        """Return the current build once it is another than `seen`, or after `patience` s."""
        with self._changed:
            self._changed.wait_for(lambda: self.ended or self.current != seen, patience)
            return self.current


class _Server(ThreadingHTTPServer):
    daemon_threads = True
    block_on_close = False
    allow_reuse_address = os.name != "nt"  # there it would share a taken port
    request_queue_size = 64

    def __init__(self, port: int, folder: Path, builds: _Builds) -> None:
        self.folder = folder
        self.builds = builds
        super().__init__((HOST, port), _Handler)

    def server_bind(self) -> None:
        # HTTPServer's own looks its name up, which can take seconds.
        TCPServer.server_bind(self)
        self.server_name, self.server_port = HOST, self.server_address[1]

    def handle_error(self, request: Any, client_address: Any) -> None:
        """Say nothing of a tab that was closed while it was being answered."""
        if not isinstance(sys.exception(), ConnectionError | TimeoutError):
            super().handle_error(request, client_address)


def _bind(folder: Path, builds: _Builds, port: int) -> _Server:
    for candidate in [port, *(range(port + 1, min(port + PORTS_TRIED, 65536)) if port else []), 0]:
        try:
            return _Server(candidate, folder, builds)
        except OSError as error:
            failed = error
    raise failed


@dataclass(frozen=True)
class _Answer:
    status: HTTPStatus
    kind: str
    body: bytes
    location: str = ""


class _Handler(BaseHTTPRequestHandler):
    server: _Server
    timeout = 30
    server_version = "calcgen"
    sys_version = ""

    def do_GET(self) -> None:
        if not self._is_host_ours():
            self._send(_text(HTTPStatus.FORBIDDEN, "this preview answers to its own address only"))
        elif self._path == "/-/events" and self.command == "GET":
            self._stream()
        else:
            self._send(_answer(self._path, self.server.folder, self.server.builds))

    do_HEAD = do_GET

    def log_message(self, format: str, *args: object) -> None:  # noqa: A002 (the base class's name)
        """Keep the terminal for the builds."""

    @property
    def _path(self) -> str:
        try:
            return urlsplit(self.path).path
        except ValueError:  # an address in brackets that is none; no file has such a name
            return self.path

    def _is_host_ours(self) -> bool:
        """Refuse other names: a page elsewhere could have its own name lead here (DNS rebinding)."""
        port = self.server.server_port
        names = {f"{HOST}:{port}", f"localhost:{port}"} | ({HOST, "localhost"} if port == 80 else set())
        return self.headers.get_all("Host", []) in [[name] for name in names]

    def _send(self, answer: _Answer) -> None:
        self.send_response(answer.status)
        self._send_common(answer.kind)
        self.send_header("Content-Length", str(len(answer.body)))
        if answer.location:
            self.send_header("Location", answer.location)
        self.end_headers()
        if self.command != "HEAD":
            self.wfile.write(answer.body)

    def _send_common(self, kind: str) -> None:
        self.send_header("Content-Type", kind)
        self.send_header("Cache-Control", "no-store")
        self.send_header("X-Content-Type-Options", "nosniff")
        self.send_header("Cross-Origin-Resource-Policy", "same-origin")

    def _stream(self) -> None:
        self.send_response(HTTPStatus.OK)
        self._send_common("text/event-stream")
        self.end_headers()
        builds, seen = self.server.builds, ""
        while not builds.ended:
            current = builds.wait(seen, _BEAT)
            # Without news a comment, which finds out whether the tab is still there.
            self.wfile.write(f"retry: 500\ndata: {current}\n\n".encode() if current != seen else b":\n\n")
            seen = current


def _answer(path: str, folder: Path, builds: _Builds) -> _Answer:
    if path == "/-/build":
        return _text(HTTPStatus.OK, builds.current)
    if path == "/-/reload.js":
        return _Answer(HTTPStatus.OK, _TYPES[".js"], _SCRIPT.encode())
    build, fault = builds.current, builds.fault  # before the file is read: else it would never reload
    for pause in _PAUSES:
        time.sleep(pause)
        file = locate(folder, path)
        if file is not None and file.is_dir():
            return _Answer(HTTPStatus.FOUND, _TYPES[".txt"], b"", location=path.rstrip("/") + "/")
        with suppress(OSError):
            if file is not None:
                return _file_answer(file, build, fault)
    return _Answer(HTTPStatus.NOT_FOUND, _TYPES[".html"], with_reload(with_fault(_MISSING, fault), build))


def _file_answer(file: Path, build: str, fault: str) -> _Answer:
    content = file.read_bytes()
    kind = _TYPES.get(file.suffix.lower(), "application/octet-stream")
    if file.suffix == ".html":
        content = with_reload(with_fault(content, fault), build)
    return _Answer(HTTPStatus.OK, kind, content)


def locate(folder: Path, path: str) -> Path | None:
    """Return the file or folder that the path of a URL means, or None when it is not inside `folder`.

    A path that ends with '/' means the `index.html` there. Links are followed, but not out of the folder.
    """
    try:
        names = unquote(path, errors="strict").removeprefix("/").split("/")
        if not names[-1]:
            names[-1] = "index.html"
        if any(name in ("", ".", "..") or set(name) & set("\\:\0") for name in names):
            return None
        file = folder.joinpath(*names).resolve(strict=True)
        return file if file.is_relative_to(folder.resolve()) else None
    except (OSError, ValueError, RuntimeError):
        return None


def with_fault(page: bytes, fault: str) -> bytes:
    """Return the HTML page with a banner at its head that says what is at fault, if anything is."""
    if not fault:
        return page
    banner = f'<p role="alert" style="{_BANNER}">{escape(fault)}</p>\n'.encode()
    start = page.lower().find(b"<body>")
    at = 0 if start < 0 else start + len(b"<body>")
    return page[:at] + banner + page[at:]


def with_reload(page: bytes, build: str) -> bytes:
    """Return the HTML page with the script that reloads it once another build than `build` stands."""
    tag = f'<script src="/-/reload.js" data-build="{build}"></script>\n'.encode()
    end = page.lower().rfind(b"</body>")
    return page + tag if end < 0 else page[:end] + tag + page[end:]


def _text(status: HTTPStatus, text: str) -> _Answer:
    return _Answer(status, _TYPES[".txt"], text.encode())
