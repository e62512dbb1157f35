"""The project names no package index, no machine's folders, and no address but the names of formats."""

from __future__ import annotations

import re
import zipfile
from collections.abc import Iterator
from pathlib import Path

from tests.packaging.project import all_files, named

NAMES_OF_FORMATS = {
    "json-schema.org",
    "schemas.openxmlformats.org",
    "schemas.microsoft.com",
    "purl.org",
    "www.w3.org",
    "purl.oclc.org",
    "openoffice.org",
}
"""Hosts in the names of namespaces: identifiers that nobody fetches."""

ADDRESS = re.compile(r"\b(?:https?|ftp|git\+\w+)://([\w.-]+)")
PACKAGE_INDEX = re.compile(r"\b(?:py" + r"pi\.org|pythonhosted\.org|index" + r"[-_]url\s*=|anaconda\.org)")
FOLDER_OF_A_MACHINE = re.compile(r"(?<![\w.~}/-])/(?:home|root|tmp|work|mnt|opt|srv|Users|var/folders)/\w")
DRIVE = re.compile(r"(?<![\w])[A-Z]:\\\\?\w")


def test_no_file_names_an_address_or_a_machine() -> None:
    found = []
    for path, text in texts():
        for number, line in enumerate(text.splitlines(), start=1):
            hosts = [host for host in ADDRESS.findall(line) if host.lower() not in NAMES_OF_FORMATS]
            rest = [
                rule.search(line) for rule in (PACKAGE_INDEX, FOLDER_OF_A_MACHINE, DRIVE) if rule.search(line)
            ]
            if hosts or rest:
                found.append(f"{path}:{number}: {hosts or [match.group() for match in rest if match]}")
    assert found == []


def texts() -> Iterator[tuple[str, str]]:
    for path in all_files():
        if path == Path(__file__):
            continue
        if path.suffix == ".docx":
            with zipfile.ZipFile(path) as archive:
                for name in archive.namelist():
                    yield f"{named(path)}!{name}", archive.read(name).decode("utf-8", errors="ignore")
        elif path.suffix not in (".png", ".jpg", ".pdf", ".ttf"):
            yield named(path), path.read_text(encoding="utf-8", errors="ignore")
