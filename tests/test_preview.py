"""The preview: what it serves, to whom, and how pages learn of a new build."""

from __future__ import annotations

import http.client
import shutil
import socket
import threading
import time
from collections.abc import Iterator
from pathlib import Path

import pytest

from calcgen.preview import Preview, locate, with_reload
from calcgen.publishing import publish

FILES = {
    "index.html": b"<!doctype html><title>Cover</title><BODY><p>cover</BODY></html>",
    "calcs/index.html": b"<p>calcs",
    "calcs/W-12.html": "<p>σ".encode(),
    "site.css": b"p{}",
    "results.json": b"{}",
}


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    publish(FILES, tmp_path / "package", {}, durable=False)
    (tmp_path / "secret.txt").write_text("secret")
    return tmp_path / "package"


@pytest.fixture
def preview(folder: Path) -> Iterator[Preview]:
    with Preview(folder) as running:
        yield running


Answer = tuple[int, dict[str, str], bytes]


def ask(preview: Preview, path: str, *, method: str = "GET", host: str | None = None) -> Answer:
    connection = http.client.HTTPConnection("127.0.0.1", preview.port, timeout=5)
    connection.putrequest(method, path, skip_host=True)
    if host != "":
        connection.putheader("Host", host or f"127.0.0.1:{preview.port}")
    connection.endheaders()
    answer = connection.getresponse()
    found = answer.status, {name.lower(): value for name, value in answer.getheaders()}, answer.read()
    connection.close()
    return found


# What it serves


@pytest.mark.parametrize(
    ("path", "file", "kind"),
    [
        ("/", "index.html", "text/html; charset=utf-8"),
        ("/index.html?x=1", "index.html", "text/html; charset=utf-8"),
        ("/calcs/", "calcs/index.html", "text/html; charset=utf-8"),
        ("/calcs/W%2D12.html", "calcs/W-12.html", "text/html; charset=utf-8"),
        ("/site.css", "site.css", "text/css; charset=utf-8"),
        ("/results.json", "results.json", "application/json"),
    ],
)
def test_files_of_the_package(preview: Preview, path: str, file: str, kind: str) -> None:
    status, headers, body = ask(preview, path)
    assert (status, headers["content-type"]) == (200, kind)
    assert headers["cache-control"] == "no-store"
    assert int(headers["content-length"]) == len(body)
    if file.endswith(".html"):
        assert b"/-/reload.js" in body
    else:
        assert body == FILES[file]


def test_the_script_is_in_what_is_served_and_not_in_the_package(preview: Preview, folder: Path) -> None:
    _, _, body = ask(preview, "/")
    start = body.index(b"<script")
    end = body.index(b"</script>\n") + len(b"</script>\n")
    assert body[:start] + body[end:] == FILES["index.html"] == (folder / "index.html").read_bytes()
    assert body[end:] == b"</BODY></html>"


def test_a_page_without_a_body_end_gets_the_script_at_its_end() -> None:
    assert with_reload(b"<p>x", "7").startswith(b'<p>x<script src="/-/reload.js" data-build="7">')


def test_head_has_no_body(preview: Preview) -> None:
    status, headers, body = ask(preview, "/site.css", method="HEAD")
    assert (status, headers["content-length"], body) == (200, "3", b"")


def test_a_folder_without_slash_is_redirected(preview: Preview) -> None:
    status, headers, _ = ask(preview, "/calcs")
    assert (status, headers["location"]) == (302, "/calcs/")


def test_a_missing_page_comes_back_by_itself_once_it_is_built(preview: Preview) -> None:
    status, _, body = ask(preview, "/calcs/W-99.html")
    assert status == 404
    assert b"/-/reload.js" in body


@pytest.mark.parametrize("method", ["POST", "PUT", "DELETE", "OPTIONS"])
def test_it_only_reads(preview: Preview, method: str) -> None:
    assert ask(preview, "/", method=method)[0] == 501


# To whom


@pytest.mark.parametrize(
    "path",
    [
        "/../secret.txt",
        "/%2e%2e/secret.txt",
        "/calcs/../../secret.txt",
        "/..%2fsecret.txt",
        "/%2e%2e%5csecret.txt",
        "//secret.txt",
        "/index.html%00",
        "/%ff",
        "/link.txt",
        "/C:/secret.txt",
        "/site.css/",
        "http://[x/secret.txt",
    ],
)
def test_nothing_outside_the_package_is_served(preview: Preview, folder: Path, path: str) -> None:
    (folder / "link.txt").symlink_to(folder.parent / "secret.txt")
    status, _, body = ask(preview, path)
    assert status == 404
    assert b"secret" not in body
    assert locate(folder, path) is None


@pytest.mark.parametrize("host", ["calcs.example", "calcs.example:{port}", "127.0.0.1:1", "127.0.0.1", ""])
@pytest.mark.parametrize("path", ["/", "/-/build", "/-/events", "/-/reload.js"])
def test_another_host_name_is_refused(preview: Preview, host: str, path: str) -> None:
    status, _, body = ask(preview, path, host=host.format(port=preview.port))
    assert status == 403
    assert b"cover" not in body


def test_localhost_is_a_name_of_ours(preview: Preview) -> None:
    assert ask(preview, "/", host=f"localhost:{preview.port}")[0] == 200


def test_it_listens_on_the_loopback_interface_alone(preview: Preview) -> None:
    assert preview.url == f"http://127.0.0.1:{preview.port}/"
    with (
        socket.socket() as other,
        pytest.raises(OSError),  # noqa: PT011 (which one is the system's choice)
    ):
        # The whole of 127/8 is loopback on Linux; a server of all interfaces would answer here.
        other.connect(("127.0.0.2", preview.port))


# Ports


def test_a_taken_port_gives_the_next_free_one_and_a_line(folder: Path) -> None:
    lines: list[str] = []
    with Preview(folder) as first, Preview(folder, first.port, say=lines.append) as second:
        assert second.port != first.port
        assert ask(second, "/")[0] == 200
        assert lines == [f"port {first.port} is not free, so the preview is at {second.url}"]


def test_the_port_asked_for_needs_no_line(folder: Path) -> None:
    with socket.socket() as probe:
        probe.bind(("127.0.0.1", 0))
        port = probe.getsockname()[1]
    lines: list[str] = []
    with Preview(folder, port, say=lines.append) as preview:
        assert (preview.port, lines) == (port, [])


# New builds


class Tab:
    """An open page's event stream."""

    def __init__(self, preview: Preview) -> None:
        self.connection = http.client.HTTPConnection("127.0.0.1", preview.port, timeout=5)
        self.connection.request("GET", "/-/events")
        self.stream = self.connection.getresponse()

    def next(self) -> str:
        while line := self.stream.readline():
            if line.startswith(b"data: "):
                return line.removeprefix(b"data: ").strip().decode()
        return "ended"

    def close(self) -> None:
        self.stream.close()
        self.connection.close()


def test_open_pages_hear_of_a_new_build_at_once(preview: Preview) -> None:
    tabs = [Tab(preview) for _ in range(30)]
    before = ask(preview, "/-/build")[2].decode()
    assert {tab.next() for tab in tabs} == {before}
    assert f'data-build="{before}"'.encode() in ask(preview, "/")[2]
    begun = time.monotonic()
    preview.announce()
    (after,) = {tab.next() for tab in tabs}
    assert time.monotonic() - begun < 2  # and not at the next sign of life, 10 s on
    assert after != before
    assert f'data-build="{after}"'.encode() in ask(preview, "/")[2]
    for tab in tabs:
        tab.close()


@pytest.mark.parametrize("path", ["/", "/calcs/W-12.html", "/no-such-page.html"])
def test_pages_older_than_the_project_say_so(preview: Preview, path: str) -> None:
    tab = Tab(preview)
    tab.next()
    preview.announce("Not rebuilt since 12:03:00: project.toml:3:1: <b> & c")
    tab.next()  # open pages reload, and say it too
    assert b">Not rebuilt since 12:03:00: project.toml:3:1: &lt;b&gt; &amp; c</p>" in ask(preview, path)[2]
    preview.announce()
    assert b"Not rebuilt" not in ask(preview, path)[2]
    tab.close()


def test_a_page_left_open_from_an_earlier_run_is_of_another_build(folder: Path) -> None:
    with Preview(folder) as first, Preview(folder) as second:
        assert ask(first, "/-/build")[2] != ask(second, "/-/build")[2]


def test_stopping_ends_open_streams_at_once(folder: Path) -> None:
    preview = Preview(folder)
    preview.start()
    tab = Tab(preview)
    tab.next()
    begun = time.monotonic()
    preview.stop()
    assert tab.next() == "ended"
    assert time.monotonic() - begun < 2  # and not at the next sign of life, 10 s on
    tab.close()
    with pytest.raises(ConnectionRefusedError):
        ask(preview, "/")


def test_a_preview_never_started_can_be_stopped(folder: Path) -> None:
    Preview(folder).stop()


def test_there_is_no_moment_without_the_package(preview: Preview, folder: Path) -> None:
    done = threading.Event()

    def rebuild() -> None:
        for _ in range(40):
            publish(FILES, folder, {}, durable=False)
        done.set()

    builder = threading.Thread(target=rebuild)
    builder.start()
    statuses = set()
    while not done.is_set():
        statuses.add(ask(preview, "/")[0])
    builder.join()
    assert statuses == {200}


def test_the_package_may_come_later(tmp_path: Path) -> None:
    with Preview(tmp_path / "package") as preview:
        assert ask(preview, "/")[0] == 404
        publish(FILES, tmp_path / "package", {}, durable=False)
        assert ask(preview, "/")[0] == 200


# In a browser


@pytest.mark.browser
def test_pages_reload_at_their_place_in_all_of_many_tabs(preview: Preview, folder: Path) -> None:
    playwright = pytest.importorskip("playwright.sync_api")
    chromium = shutil.which("chromium")
    if chromium is None:
        pytest.skip("needs Chromium")
    page_of = '<!doctype html><body style="height:5000px"><p id="said">{}</p></body>'
    publish({"index.html": page_of.format("one").encode()}, folder, {}, durable=False)
    with playwright.sync_playwright() as driver:
        browser = driver.chromium.launch(executable_path=chromium, args=["--no-sandbox"])
        context = browser.new_context()
        tabs = [context.new_page() for _ in range(9)]  # more than the connections a browser opens to a host
        for number, tab in enumerate(tabs):
            tab.goto(preview.url, timeout=5000)
            tab.evaluate(f"scrollTo(0, {100 * number})")
        publish({"index.html": page_of.format("two").encode()}, folder, {}, durable=False)
        preview.announce()
        for number, tab in enumerate(tabs):
            tab.wait_for_function("document.querySelector('#said').textContent === 'two'", timeout=5000)
            tab.wait_for_function(f"scrollY === {100 * number}", timeout=5000)
        # Leader closed: another tab takes over.
        tabs[0].close()
        publish({"index.html": page_of.format("three").encode()}, folder, {}, durable=False)
        preview.announce()
        for tab in tabs[1:]:
            tab.wait_for_function("document.querySelector('#said').textContent === 'three'", timeout=5000)
        browser.close()
