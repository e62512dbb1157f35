"""The process of its own that fills a unit's template: asked on its input, answers on its output, writes no file."""

from __future__ import annotations

import json
import re
import sys
from base64 import b64decode, b64encode
from collections.abc import Iterator
from datetime import datetime
from typing import Any

from handoff.outside.limits import keep_in, limit


def main() -> None:
    """Fill one template and answer as JSON: the file and what was printed, or the fault."""
    from handoff.document import finish, outside, render  # noqa: PLC0415 (loaded before the limits are set)

    asked = json.loads(sys.stdin.buffer.read())
    limit()
    keep_in()
    try:
        answer = _filled(asked, finish, outside, render)
    except MemoryError:
        answer = {
            "fault": f"the template {asked['name']} was stopped: it fills the memory; look for a loop in it"
        }
    sys.stdout.write(json.dumps(answer))


def _filled(asked: dict[str, Any], finish: Any, outside: Any, render: Any) -> dict[str, Any]:
    from jinja2.exceptions import SecurityError  # noqa: PLC0415

    from handoff.document.errors import DocumentError  # noqa: PLC0415
    from handoff.document.paper import Page  # noqa: PLC0415

    name = asked["name"]
    title, made_at, digest, carried = asked["properties"]
    properties = finish.Properties(title, datetime.fromisoformat(made_at), digest, carried)
    try:
        filled = render.fill(b64decode(asked["template"]), name, outside.unpacked(asked["data"]))
        content = finish.finish(filled.template.docx, properties, Page(*asked["page"]), asked["drawings"])
    except DocumentError as error:
        if isinstance(error.__cause__, SecurityError):
            return {
                "fault": f"the template {name} was stopped: it reaches for the program itself ({error.__cause__})"
            }
        return {"fault": _without_values(str(error), asked["data"])}
    except MemoryError:
        raise
    except Exception as error:  # a foreign template may fail in any way
        if "loader" in str(error):
            return {"fault": f"the template {name} was stopped: it asks for another file"}
        return {"fault": f"the template {name} was stopped: it failed with {type(error).__name__}"}
    return {"content": b64encode(content).decode(), "printed": filled.printed}


def _without_values(said: str, data: Any) -> str:
    """A template can name a field by a value of the page; the value is the patient's and is not repeated."""
    values = set(_texts(data))
    return re.sub(r"'([^']*)'", lambda found: "a value of the page" if found[1] in values else found[0], said)


def _texts(data: Any) -> Iterator[str]:
    if isinstance(data, dict):
        for value in data.values():
            yield from _texts(value)
    elif isinstance(data, list):
        for value in data:
            yield from _texts(value)
    elif isinstance(data, str):
        yield data


if __name__ == "__main__":
    main()
