"""What a care plan carries of its making, so that it can be read back: patient, moment, version, tasks.

It stands in the custom properties of the document, which word processors keep when they save.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from handoff.assess import Assessment
from handoff.document.references import references
from handoff.state.access import words

PREFIX = "handoff "
TASK, NUMBER = "task ", "number "

_TYPE = "application/vnd.openxmlformats-officedocument.custom-properties+xml"
_RELATION = "http://schemas.openxmlformats.org/officeDocument/2006/relationships/custom-properties"
_SPACE = "http://schemas.openxmlformats.org/officeDocument/2006/custom-properties"
_VALUES = "http://schemas.openxmlformats.org/officeDocument/2006/docPropsVTypes"
_FORMAT = "{D5CDD505-2E9C-101B-9397-08002B2CF9AE}"
_FIRST = 2


def made_from(assessment: Assessment) -> dict[str, str]:
    """Return the properties of the care plan of ``assessment``."""
    state = assessment.state
    made = {
        "made at": state.clock.iso(assessment.now),
        "version": state.digest,
        "name": state.name,
        "born": words(state.patient.get("born")),
    }
    made |= {f"{NUMBER}{kind}": number for kind, number in state.identifiers}
    made |= {f"{TASK}{ref}": key for key, ref in references(assessment.actions).items()}
    return {key: value for key, value in made.items() if value}


def put_in(package: Any, properties: Mapping[str, str]) -> None:
    """Add ``properties`` to a python-docx package, each under its name with the prefix of this tool."""
    from docx.opc.packuri import PackURI  # noqa: PLC0415 (heavy: loaded when a document is made)
    from docx.opc.part import Part  # noqa: PLC0415
    from lxml import etree  # noqa: PLC0415

    root = etree.Element(f"{{{_SPACE}}}Properties", nsmap={None: _SPACE, "vt": _VALUES})
    for number, (name, value) in enumerate(properties.items(), start=_FIRST):
        one = etree.SubElement(
            root, f"{{{_SPACE}}}property", fmtid=_FORMAT, pid=str(number), name=f"{PREFIX}{name}"
        )
        etree.SubElement(one, f"{{{_VALUES}}}lpwstr").text = value
    content = etree.tostring(root, xml_declaration=True, encoding="UTF-8", standalone=True)
    part = Part(PackURI("/docProps/custom.xml"), _TYPE, content, package)
    package.relate_to(part, _RELATION)
