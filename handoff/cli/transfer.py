"""``handoff transfer``: the packet that goes with a patient to another hospital."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING, Annotated

import typer

from handoff.cli.draft import DeidentifiedOption, ProtectOption
from handoff.cli.edge import (
    AtOption,
    BundledOption,
    Exit,
    FileArgument,
    PolicyOption,
    complain,
    leave,
    look_alikes,
    open_or_stop,
    say,
    setup_or_stop,
    stop,
    who,
)

if TYPE_CHECKING:
    from handoff.assess import Assessment
    from handoff.registry import Setup
    from handoff.state.load import Loaded
    from handoff.transfer.packet import Made, Sent
    from handoff.transfer.profile import Profile

ToOption = Annotated[
    str,
    typer.Option("--to", metavar="PROFILE", help="What the receiver wants: a profile file, or: burn-centre"),
]
PacketOutOption = Annotated[
    Path | None,
    typer.Option("--out", metavar="DIR", help="Where the packet's folder goes; beside the file if left out"),
]
AddendumOption = Annotated[
    Path | None,
    typer.Option(
        "--addendum", metavar="PACKET", help="The packet that has left: its folder, zip or items.json"
    ),
]
ConfidentialOption = Annotated[
    bool, typer.Option("--confidential", help="Let the confidential entries leave, on a sheet of their own")
]


def transfer(
    file: FileArgument,
    to: ToOption = "burn-centre",
    at: AtOption = "",
    out: PacketOutOption = None,
    policy: PolicyOption = None,
    bundled_only: BundledOption = False,
    addendum: AddendumOption = None,
    confidential: ConfidentialOption = False,
    protect: ProtectOption = False,
    deidentified: DeidentifiedOption = False,
) -> None:
    """Make the transfer packet: one folder, and the same as one zip to send.

    Example: handoff transfer ferrandel.yaml --to burn-centre --at "2026-03-14 19:30" --out packets
    """
    from handoff.work import assess_loaded

    if deidentified and (confidential or addendum):
        other = "--confidential" if confidential else "--addendum"
        stop(Exit.USAGE, f"--deidentified makes a case for teaching and goes without {other}; leave one out")
    profile = _profile_or_stop(to)
    setup = _setup_for(profile, setup_or_stop(policy, bundled_only))
    loaded = open_or_stop(file, setup, at)
    report: list[str] = []
    if deidentified:
        assessment, profile, made, report = _teaching_or_stop(loaded, profile, setup)
    else:
        assessment = assess_loaded(loaded, setup)
        sent = _sent_or_stop(addendum) if addendum else None
        made = _packet_or_stop(assessment, profile, setup, file, confidential, sent)
    written = _write_or_stop(out or file.parent, made, file.stem if not deidentified else made.name, protect)
    say(who(loaded.state))
    look_alikes(file)
    for fault in assessment.warnings:
        complain(fault.said(assessment.state.file))
    _say_missing(assessment, profile, setup)
    for path in written:
        say(f"written: {path}")
    for line in report:
        say(line)
    say("Check every sheet against the patient and the prescription before it leaves.")
    leave(assessment)


def _profile_or_stop(to: str) -> Profile:
    from handoff.transfer.profile import ProfileError, load_profile

    try:
        return load_profile(to)
    except ProfileError as error:
        stop(Exit.SETUP, *error.lines)


def _setup_for(profile: Profile, setup: Setup) -> Setup:
    """Return the setup with the rule sets of the receiver; a choice that is not there names its nearest."""
    from handoff.policy import PolicyError
    from handoff.registry import PluginError, prepare
    from handoff.state.keywords import nearest

    words = [word for plugin in setup.plugins for word in (plugin.name, *plugin.owns)]
    for extra in profile.extra:
        first = extra.key.partition(".")[0]
        if first not in words:
            stop(
                Exit.SETUP,
                f"{profile.file}:{extra.line}: extra: no plugin reports '{extra.key}'; {nearest(first, words)}",
            )
    try:
        return prepare(profile.policy(setup.policy), setup.plugins)
    except (PolicyError, PluginError) as error:
        stop(Exit.SETUP, f"{profile.file}: choices: {error}")


def _sent_or_stop(path: Path) -> Sent:
    from handoff.transfer.sent import NotAPacket, read_sent

    try:
        sent, changed = read_sent(path)
    except NotAPacket as error:
        stop(Exit.USAGE, f"--addendum: {error}")
    for name in changed:
        complain(f"{name} is no longer as it was when the packet was made")
    return sent


def _packet_or_stop(
    assessment: Assessment,
    profile: Profile,
    setup: Setup,
    file: Path,
    confidential: bool,
    sent: Sent | None,
) -> Made:
    from handoff.document import DocumentError
    from handoff.document.confidential import confidential_sheet
    from handoff.shift.people import DifferentPatients
    from handoff.shift.since import WrongOrder
    from handoff.state.file_text import read_text
    from handoff.transfer.leaving import state_text
    from handoff.transfer.packet import packet

    if confidential and confidential_sheet(assessment) is None:
        complain("--confidential: the file holds no confidential entry; no sheet was made for it")
        confidential = False
    text = state_text(read_text(file), str(file), with_confidential=confidential)
    if text is None:
        complain("the state file stays here: its confidential entries could not be taken out of a copy")
    try:
        return packet(
            assessment,
            profile,
            setup.parameters,
            file.stem,
            text.encode() if text is not None else None,
            with_confidential=confidential,
            sent=sent,
        )
    except DocumentError as error:
        stop(Exit.SETUP, f"the packet could not be made: {error}")
    except DifferentPatients as error:
        stop(Exit.USAGE, *error.lines)
    except WrongOrder as error:
        stop(Exit.USAGE, f"--addendum: {error}")


def _teaching_or_stop(
    loaded: Loaded, profile: Profile, setup: Setup
) -> tuple[Assessment, Profile, Made, list[str]]:
    """Return the case without identifiers, the receiver without a name, its packet, and what is to be said of it."""
    from handoff.document import DocumentError
    from handoff.privacy.deidentify import STEM
    from handoff.privacy.deidentify import deidentified as without_identifiers
    from handoff.transfer.packet import packet
    from handoff.transfer.profile import nameless

    assessment, report = without_identifiers(loaded, setup)
    bare = nameless(profile)
    try:
        made = packet(assessment, bare, setup.parameters, STEM, None, name=f"{STEM}-transfer")
    except DocumentError as error:
        stop(Exit.SETUP, f"the packet could not be made: {error}")
    return assessment, bare, made, report.lines()


def _protected(made: Made, stem: str) -> tuple[dict[str, bytes], bytes]:
    """Return the files of the folder and the one to send, encrypted."""
    from handoff.privacy.protect import CannotProtect, ask_password, protected, protected_bundle

    try:
        password = ask_password()
        return protected(made.files, stem, password), protected_bundle(made.files, password)
    except CannotProtect as error:
        stop(Exit.USAGE, str(error))


def _write_or_stop(folder: Path, made: Made, stem: str, protect: bool) -> list[Path]:
    from handoff.files import PART, CannotWrite, write_all

    files, bundle = _protected(made, stem) if protect else (dict(made.files), made.zipped())
    place = folder / made.name
    there = [one.name for one in place.iterdir()] if place.is_dir() else []
    strays = sorted(name for name in there if name not in files and not name.startswith(PART))
    if strays:
        stop(
            Exit.USAGE,
            f"{place} holds what is not of this packet: {', '.join(strays)}; move it away or name another --out",
        )
    try:
        place.mkdir(parents=True, exist_ok=True)
        contents = {f"{made.name}/{name}": content for name, content in files.items()}
        return write_all(folder, {**contents, f"{made.name}.zip": bundle})
    except OSError as error:
        stop(Exit.USAGE, f"the folder {place} cannot be made ({error.strerror}); name another with --out")
    except CannotWrite as error:
        stop(Exit.USAGE, str(error))


def _say_missing(assessment: Assessment, profile: Profile, setup: Setup) -> None:
    from handoff.transfer.law import unknown_country
    from handoff.transfer.missing import answers, missing

    lacking = missing(answers(assessment, profile))
    if lacking:
        say(f"not recorded, and {profile.name} asks for it:")
    for line in lacking:
        say(f"  {line}")
    country = unknown_country(assessment, setup.parameters)
    if country:
        complain(country)
