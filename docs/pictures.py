"""Make the pictures of the guide anew: ``python3 -m docs.pictures``.

The screens are drawn from what the commands print for an invented patient. The pages are printed
where LibreOffice and pdftoppm are installed, and stay as they are where they are not.
"""

from __future__ import annotations

import os
import re
import shutil
import subprocess
import sys
import tempfile
from pathlib import Path

from rich.console import Console
from rich.text import Text

FOLDER = Path(__file__).resolve().parent / "pictures"
EXAMPLE = Path(__file__).resolve().parents[1] / "examples" / "house-fire.yaml"
EVENING = "2026-03-14 19:30"
MORNING = "2026-03-15 07:00"
WIDTH, LINES = 96, 26
DOTS_PER_INCH = 60
ANSWERS = (
    "Europe/Dublin\nTomas Ferrandel\n11/02/1985\n1985-02-11\nHSH-204518\n1\nWard 6, bed 3\n82\n82 kg\n1\n"
    "2\nstop\n"
)
SHOWN = 3
_BOX = re.compile(r"(row|by):([A-W]\d+:(\d\d)(\d\d))")
_CREDIT = re.compile(r"<!-- Generated.*?-->\s*")
_FONT = re.compile(r"@font-face \{.*?\}\s*", re.DOTALL)


def main() -> int:
    """Write every picture and return the exit code."""
    with tempfile.TemporaryDirectory() as place:
        folder = Path(place)
        shutil.copy(EXAMPLE, folder)
        for name, picture in screens(folder).items():
            (FOLDER / name).write_text(picture, encoding="utf-8", newline="\n")
            print(f"written: docs/pictures/{name}")
        if shutil.which("soffice") and shutil.which("pdftoppm"):
            for kind in ("handover", "care-plan"):
                _page(folder, kind)
    return 0


def screens(folder: Path) -> dict[str, str]:
    """Return the pictures of the screens by name; ``folder`` holds the invented patient."""
    file = EXAMPLE.name
    document = f"{EXAMPLE.stem}-care-plan.docx"
    entries = ("chart", file, "urine 35 mL", "pulse 118 /min", "--by", "JO", "--now", EVENING)
    shown = {
        "begin.svg": (("begin", "ferrandel.yaml", "--now", EVENING), ANSWERS),
        "due.svg": (("due", file, "--at", EVENING), ""),
        "chart.svg": (entries, ""),
    }
    made = {}
    _run(folder, ("draft", file, "--at", EVENING), "")
    for name, (arguments, answers) in shown.items():
        made[name] = _drawn(name, arguments, _run(folder, arguments, answers))
    _tick(folder / document)
    arguments = ("collect", document, file, "--now", MORNING, "--yes")
    made["collect.svg"] = _drawn("collect.svg", arguments, _run(folder, arguments, ""))
    return made


def _run(folder: Path, arguments: tuple[str, ...], answers: str) -> str:
    environment = {**os.environ, "TZ": "Europe/Dublin", "PYTHONIOENCODING": "utf-8"}
    done = subprocess.run(  # noqa: S603
        [sys.executable, "-m", "handoff", *arguments],
        cwd=folder,
        env=environment,
        input=answers,
        capture_output=True,
        encoding="utf-8",
        check=False,
    )
    return _with_answers(done.stdout, answers)


def _with_answers(shown: str, answers: str) -> str:
    """Put what was typed behind each prompt, as a terminal shows it."""
    typed = iter(answers.splitlines())
    return re.sub(r"\] > ", lambda prompt: f"{prompt[0]}{next(typed, '')}\n", shown)


def _tick(document: Path) -> None:
    from docx import Document  # noqa: PLC0415 (only for this picture)

    from handoff.document.names import WORD, WORD_2010  # noqa: PLC0415

    word = Document(str(document))
    ticked: list[str] = []
    for control in word.element.body.iter(f"{WORD}sdt"):
        tag = control.find(f"{WORD}sdtPr/{WORD}tag")
        name = "" if tag is None else tag.get(f"{WORD}val")
        box = _BOX.fullmatch(name)
        if box and box[1] == "row" and len(ticked) < SHOWN:
            ticked.append(box[2])
            control.find(f"{WORD}sdtPr/{WORD_2010}checkbox/{WORD_2010}checked").set(f"{WORD_2010}val", "1")
            next(control.iter(f"{WORD}t")).text = "\u2612"
        if box and box[1] == "by" and box[2] in ticked:
            next(control.iter(f"{WORD}t")).text = f"{box[3]}:{box[4]} JO"
    word.save(str(document))


def _drawn(name: str, arguments: tuple[str, ...], shown: str) -> str:
    """Return a terminal with the command and the first lines of what it shows; no font is fetched."""
    said = " ".join(f'"{part}"' if " " in part else part for part in arguments)
    console = Console(record=True, width=WIDTH, file=open(os.devnull, "w", encoding="utf-8"))  # noqa: SIM115, PTH123
    lines = shown.rstrip().splitlines()
    console.print(Text(f"$ handoff {said}", style="bold"), highlight=False)
    for line in [*lines[:LINES], *(["..."] if len(lines) > LINES else [])]:
        console.print(Text(line), highlight=False)
    stem = name.partition(".")[0]
    return _CREDIT.sub(
        "", _FONT.sub("", console.export_svg(title=f"handoff {stem}", unique_id=f"handoff-{stem}"))
    )


def _page(folder: Path, kind: str) -> None:
    document = folder / f"{EXAMPLE.stem}-{kind}.docx"
    profile = f"-env:UserInstallation={(folder / 'office').as_uri()}"
    office = ["soffice", profile, "--headless", "--convert-to", "pdf", "--outdir", str(folder), str(document)]
    subprocess.run(office, check=True, capture_output=True)  # noqa: S603
    first = ["-png", "-r", str(DOTS_PER_INCH), "-f", "1", "-l", "1", "-singlefile"]
    pdf = document.with_suffix(".pdf")
    subprocess.run(["pdftoppm", *first, str(pdf), str(FOLDER / kind)], check=True)  # noqa: S603, S607
    print(f"written: docs/pictures/{kind}.png")


if __name__ == "__main__":
    sys.exit(main())
