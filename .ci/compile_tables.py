"""Build hook: read the bundled tables and the merged schema once, so that an installed command starts quickly."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import Any

from hatchling.builders.hooks.plugin.interface import BuildHookInterface


class CompileTables(BuildHookInterface):  # type: ignore[type-arg]
    """Writes the compiled tables and templates of this very checkout before a wheel is packed or linked."""

    def initialize(self, version: str, build_data: dict[str, Any]) -> None:
        """Compile the tables; what was made is proven equal to its sources before it is written."""
        sys.path.insert(0, self.root)
        try:
            from handoff.compiled import FILE, TEMPLATES  # noqa: PLC0415  (importable only from here on)
            from handoff.document.prepared import compile_templates  # noqa: PLC0415
            from handoff.registry import compile_bundled  # noqa: PLC0415

            compile_bundled(Path(self.root) / "plugins", FILE)
            compile_templates(TEMPLATES)
        finally:
            sys.path.remove(self.root)
