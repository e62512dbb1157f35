"""What all tests share: tools that a test needs, and no silent gaps where everything must run."""

from __future__ import annotations

import os
import shutil
from pathlib import Path

import pytest
from hypothesis import settings

ROOT = Path(__file__).resolve().parents[1]
EVERYTHING_MUST_RUN = os.environ.get("CI", "").lower() == "true"

# A run that decides over a change tries the same examples each time; elsewhere new ones are sought.
settings.register_profile("same", derandomize=True, deadline=None)
if EVERYTHING_MUST_RUN:
    settings.load_profile("same")


def needs_tool(name: str) -> str:
    """Return the path of the program ``name``; without it the test is skipped, or fails where CI=true."""
    path = shutil.which(name)
    if path is None:
        pytest.skip(f"the program '{name}' is not on this machine")
    return path


@pytest.hookimpl(trylast=True)
def pytest_sessionfinish(session: pytest.Session) -> None:
    """Where CI=true, a run with a skipped test is a failed run."""
    if EVERYTHING_MUST_RUN and _skipped(session.config) and session.exitstatus == pytest.ExitCode.OK:
        session.exitstatus = pytest.ExitCode.TESTS_FAILED


def pytest_terminal_summary(terminalreporter: pytest.TerminalReporter) -> None:
    """Name what was skipped, and say that it fails the run where CI=true."""
    if EVERYTHING_MUST_RUN and (skipped := _skipped(terminalreporter.config)):
        terminalreporter.section("skipped, and so failed: CI=true")
        for report in skipped:
            reason = report.longrepr[2] if isinstance(report.longrepr, tuple) else report.longrepr
            terminalreporter.write_line(f"{report.nodeid}: {reason}")


def _skipped(config: pytest.Config) -> list[pytest.TestReport | pytest.CollectReport]:
    reporter = config.pluginmanager.get_plugin("terminalreporter")
    return list(reporter.stats.get("skipped", [])) if reporter else []
