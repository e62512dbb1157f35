"""Outside plugins made for a test: a package and its entry point in a folder, as an installation lays them."""

from __future__ import annotations

import json
from pathlib import Path

HEAD = """\
from handoff.plugin import *

def one(case):
    return Findings((fact("NAME.one", "One", "one", system=System.GENERAL),))

def told(case):
    return ()

"""
END = (
    '\nplugin = Plugin(name="NAME", title="Title of NAME", package="outside_NAME", compute=one, check=told)\n'
)
TABLE = """\
sources: {}
parameters: {limit: {value: 3, unit: h, kind: common practice, source: none, locator: ""}}
choices: {}
"""


def install(folder: Path, name: str, body: str = "", end: str = END) -> Path:
    """Lay the plugin ``name`` into ``folder``; ``body`` may redefine ``one`` and ``told``. Return its policy."""
    package = folder / f"outside_{name}"
    package.mkdir(parents=True)
    (package / "__init__.py").write_text((HEAD + body + end).replace("NAME", name), encoding="utf-8")
    (package / "schema.json").write_text(
        json.dumps(
            {"title": name, "block": {"type": "object", "properties": {"said": {"$ref": "#/$defs/text"}}}}
        ),
        encoding="utf-8",
    )
    (package / "parameters.yaml").write_text(TABLE, encoding="utf-8")
    info = folder / f"outside_{name}-1.dist-info"
    info.mkdir()
    (info / "METADATA").write_text(f"Metadata-Version: 2.1\nName: outside-{name}\nVersion: 1\n")
    (info / "entry_points.txt").write_text(f"[handoff.plugins]\n{name} = outside_{name}:plugin\n")
    policy = folder / f"{name}-policy.yaml"
    policy.write_text(f"policy: 1\nplugins: [{name}]\n", encoding="utf-8")
    return policy
