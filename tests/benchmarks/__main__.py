"""`python -m tests.benchmarks`: times of builds and rebuilds, as ratios within one run; never a pass or fail.

Cold: both demos in processes of their own, into empty folders, start included; the program is compiled to
bytecode before, as an installation leaves it. Unchanged: the same again.
Save to page: `watch` in a process, a number edited in one calc, until the preview serves it in the page.
Sections and beams: see `sections`, `beams`.
"""

from __future__ import annotations

import os
import re
import shutil
import statistics
import subprocess
import sys
import tempfile
import time
import urllib.request
from pathlib import Path

from tests.benchmarks import beams, sections

PROJECTS = Path(__file__).parents[2] / "projects"
DEMOS = ("heron-lock", "mill-loft")


def timed(*command: str) -> float:
    began = time.perf_counter()
    subprocess.run([sys.executable, *command], check=True, capture_output=True)
    return time.perf_counter() - began


def builds(folder: Path) -> tuple[float, float]:
    """Return the seconds for both demos: cold, and unchanged."""
    cold, unchanged = (
        sum(timed("-m", "calcgen", "build", str(folder / demo)) for demo in DEMOS) for _ in range(2)
    )
    return cold, unchanged


def save_to_page(folder: Path, rounds: int = 5) -> list[float]:
    """Return the seconds from the save of a calc to its page with the new number, over some rounds."""
    calc = next(iter(sorted((folder / "calcs").glob("*.md"))))
    text = (
        calc.read_text(encoding="utf-8") + "\n{benchmark_value}\n\n```inputs\nbenchmark_value = 1000\n```\n"
    )
    calc.write_text(text, encoding="utf-8")
    command = [sys.executable, "-u", "-m", "calcgen", "watch", str(folder), "--port", "0"]
    with subprocess.Popen(command, stdout=subprocess.PIPE, stderr=subprocess.DEVNULL, text=True) as process:
        assert process.stdout is not None
        try:
            url = ""
            for line in process.stdout:
                found = re.search(r"http://\S+", line)
                url = found[0] if found else url
                if re.match(r"\d\d:\d\d:\d\d", line):
                    break
            return [_round(url, calc, text, n) for n in range(1, rounds + 1)]
        finally:
            process.terminate()


def _round(url: str, calc: Path, text: str, number: int) -> float:
    time.sleep(0.3)
    value = 1000 + number
    began = time.perf_counter()
    calc.write_text(text.replace("benchmark_value = 1000", f"benchmark_value = {value}"), encoding="utf-8")
    page = f"{url.rstrip('/')}/{calc.stem}.html"
    while time.perf_counter() - began < 20:
        with urllib.request.urlopen(page) as answer:  # noqa: S310  our own preview on the loopback
            if str(value) in answer.read().decode():
                return time.perf_counter() - began
        time.sleep(0.005)
    raise TimeoutError(page)


def main() -> None:
    with tempfile.TemporaryDirectory() as temporary:
        folder = Path(temporary)
        os.environ.pop("PYTHONDONTWRITEBYTECODE", None)
        os.environ["PYTHONPYCACHEPREFIX"] = str(folder / "bytecode")
        for demo in DEMOS:
            shutil.copytree(
                PROJECTS / demo, folder / "first" / demo, ignore=shutil.ignore_patterns("package")
            )
        builds(folder / "first")
        for demo in DEMOS:
            shutil.copytree(PROJECTS / demo, folder / demo, ignore=shutil.ignore_patterns("package"))
        start = statistics.median(timed("-c", "import numpy, matplotlib.figure") for _ in range(3))
        cold, unchanged = builds(folder)
        saves = save_to_page(folder / DEMOS[0])
    median = statistics.median(saves)
    rows = (
        ("import of numpy and matplotlib alone", start, "the yardstick"),
        ("both demos, cold", cold, "aim: 3 s"),
        ("both demos, unchanged", unchanged, "aim: 0.7 s"),
        ("save to page in watch, median", median, "aim: 0.3 s"),
        ("save to page in watch, worst", max(saves), ""),
    )
    for name, seconds, aim in rows:
        print(f"{name:40} {seconds:7.3f} s   {seconds / start:6.2f} × the import   {aim}")  # noqa: T201
    sections.main()
    beams.main()


if __name__ == "__main__":
    main()
