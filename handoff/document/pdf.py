"""Word files as PDF, by LibreOffice where it is installed; nothing of its work stays on the machine."""

from __future__ import annotations

import shutil
import subprocess
import tempfile
from collections.abc import Mapping
from pathlib import Path

PROGRAMS = ("soffice", "libreoffice")
STOPPED_AFTER_S = 180


class NoPdf(Exception):
    """A PDF could not be made; says why and what to do."""


def pdf_program() -> str:
    """Return the path of the office program.

    Raises:
        NoPdf: None is installed.
    """
    found = next((path for name in PROGRAMS if (path := shutil.which(name))), None)
    if found is None:
        raise NoPdf(
            "LibreOffice is not installed, and --pdf needs it; leave --pdf out, or save as PDF in Word"
        )
    return found


def as_pdf(documents: Mapping[str, bytes]) -> dict[str, bytes]:
    """Return the Word files among ``documents`` as PDF files, by file name.

    Raises:
        NoPdf: The office program is missing, failed, or did not come to an end.
    """
    program = pdf_program()
    words = {name: content for name, content in documents.items() if name.endswith(".docx")}
    # The folder is the owner's alone and goes with all that is in it, whatever happens.
    with tempfile.TemporaryDirectory(prefix="handoff-pdf-") as made:
        folder = Path(made)
        for number, content in enumerate(words.values()):
            (folder / f"{number}.docx").write_bytes(content)
        command = [
            program,
            f"-env:UserInstallation={(folder / 'profile').as_uri()}",
            "--headless",
            "--norestore",
        ]
        command += ["--convert-to", "pdf", "--outdir", made]
        command += [str(folder / f"{number}.docx") for number in range(len(words))]
        try:
            subprocess.run(command, capture_output=True, timeout=STOPPED_AFTER_S, check=True)  # noqa: S603
            return {
                f"{name.removesuffix('.docx')}.pdf": (folder / f"{number}.pdf").read_bytes()
                for number, name in enumerate(words)
            }
        except (subprocess.SubprocessError, OSError) as error:
            raise NoPdf(
                f"LibreOffice could not make the PDF ({type(error).__name__}); try again, or leave --pdf out"
            ) from None
