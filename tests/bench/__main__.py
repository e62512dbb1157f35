"""``python -m tests.bench [--runs 7] [--only draft ...] [--json FILE]``: a table of ratios, and the same as JSON.

Every figure is the median of the ratios of alternated runs against a floor of the same run, so that
it means the same on any machine. It judges nothing in the tests: a busy machine is no fault of the code.
"""

from __future__ import annotations

import argparse
import json
import platform
import sys
import tempfile
from pathlib import Path

from tests.bench import comparisons
from tests.bench.processes import environment


def main() -> int:
    """Measure what was asked for; exit code 1 where a figure is beyond its limit."""
    parser = argparse.ArgumentParser(prog="python -m tests.bench")
    parser.add_argument(
        "--runs", type=int, default=7, help="counted runs of each command, seven at least to quote"
    )
    parser.add_argument("--only", nargs="*", choices=list(comparisons.ALL), help="some of the comparisons")
    parser.add_argument("--json", type=Path, help="write the figures to this file as well")
    given = parser.parse_args()
    compile_everything()
    found = []
    print(f"{'figure':58} {'measured':>9} {'limit':>9}")
    with tempfile.TemporaryDirectory(prefix="bench-") as folder:
        for name in given.only or comparisons.ALL:
            place = Path(folder) / name
            place.mkdir()
            for figure in comparisons.ALL[name](place, given.runs):
                found.append(figure)
                print(figure.line(), flush=True)
    if given.json:
        about = {"python": platform.python_version(), "system": platform.system(), "runs": given.runs}
        figures = [figure.__dict__ for figure in found]
        given.json.write_text(json.dumps({**about, "figures": figures}, indent=1) + "\n", encoding="utf-8")
    return 0 if all(figure.kept() for figure in found) else 1


def compile_everything() -> None:
    """Compile all Python files and the bundled tables once, as an installation does."""
    import compileall
    import sysconfig

    from handoff.compiled import FILE, TEMPLATES
    from handoff.document.prepared import compile_templates
    from handoff.registry import compile_bundled
    from tests.bench.files import ROOT

    compile_bundled(ROOT / "plugins", FILE)
    compile_templates(TEMPLATES)
    for folder in (
        sysconfig.get_path("purelib"),
        ROOT / "handoff",
        ROOT / "plugins",
        ROOT / "tests" / "bench",
    ):
        compileall.compile_dir(str(folder), quiet=2, workers=1)
    assert "PYTHONDONTWRITEBYTECODE" not in environment()


if __name__ == "__main__":
    sys.exit(main())
