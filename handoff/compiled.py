"""Bundled tables, the merged schema and the templates, read once in the build so that no command parses them again.

Each is kept under the digest of the text that it was made from. A table that was edited since has
another digest, is not found here and is read from its source: what is kept can be absent, never stale.
"""

from __future__ import annotations

import hashlib
import json
from collections.abc import Iterable, Mapping
from functools import cache
from pathlib import Path
from typing import Any

FILE = Path(__file__).with_name("compiled.json")
"""Tables and schema."""

TEMPLATES = Path(__file__).with_name("compiled-templates.json")
"""What the tags of the built-in Word templates become; only drafting needs them."""


def digest_of(texts: Iterable[str]) -> str:
    """Return the digest under which what was made from ``texts`` is kept; their borders count."""
    found = hashlib.sha256()
    for text in texts:
        content = text.encode()
        found.update(f"{len(content)}:".encode())
        found.update(content)
    return found.hexdigest()


def kept(texts: Iterable[str], file: Path = FILE) -> Any | None:
    """Return what the build made from exactly these texts, or None when it made nothing from them."""
    return _all(file).get(digest_of(texts))


def parsed(text: str) -> Any:
    """Return the plain data of a trusted YAML text of our own.

    Raises:
        yaml.YAMLError: It is not YAML.
    """
    import yaml  # noqa: PLC0415  (a command whose tables are all compiled need not load it here)

    return yaml.load(text, Loader=getattr(yaml, "CSafeLoader", yaml.SafeLoader))  # noqa: S506  (a safe loader)


def keep(made: Iterable[tuple[tuple[str, ...], Any]], file: Path) -> None:
    """Write what was made from each group of texts to ``file``, and prove that it reads back equal.

    Raises:
        ValueError: Something that was made does not survive as JSON.
    """
    content = {digest_of(texts): data for texts, data in made}
    text = json.dumps(content, ensure_ascii=False, separators=(",", ":"), allow_nan=False)
    if json.loads(text) != content:
        raise ValueError("a table does not survive as JSON; write its keys as text")
    file.write_text(text, encoding="utf-8")


@cache
def _all(file: Path) -> Mapping[str, Any]:
    try:
        found: Mapping[str, Any] = json.loads(file.read_text(encoding="utf-8"))
    except (OSError, ValueError):
        return {}
    return found
