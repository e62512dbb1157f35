"""Protect what leaves the machine by a password: Office's own encryption for Word files, AES-256 for a bundle.

The password is asked for twice at the terminal. It is never an argument, never in the environment
and never written down; whoever loses it cannot open the files.
"""

from __future__ import annotations

import getpass
import warnings
from collections.abc import Callable, Mapping
from io import BytesIO
from zipfile import ZIP_DEFLATED, ZipFile, ZipInfo

LETTERS_AT_LEAST = 10
"""A shorter password is found by trying; four words are easier to say on the telephone than signs."""

INSIDE = "inside.zip"
"""The one name that a protected bundle shows: the names of its files are as secret as their content."""

_EPOCH = (1980, 1, 1, 0, 0, 0)


class CannotProtect(Exception):
    """Nothing was protected and nothing may be written; says why and what to do."""


def ask_password(ask: Callable[[str], str] = getpass.getpass) -> str:
    """Return a password that was typed twice at the terminal, unseen.

    Raises:
        CannotProtect: There is no terminal, it is too short, or the two differ.
    """
    try:
        with warnings.catch_warnings():
            warnings.simplefilter("error", getpass.GetPassWarning)
            first = ask("Password for the documents: ")
            if len(first) < LETTERS_AT_LEAST:
                raise CannotProtect(
                    f"the password is too short; take {LETTERS_AT_LEAST} letters or more, for example four words"
                )
            second = ask("The same password again: ")
    except (EOFError, OSError, getpass.GetPassWarning):
        raise CannotProtect(
            "--protect asks for the password at the terminal; run it in a terminal window, without a pipe"
        ) from None
    if first != second:
        raise CannotProtect("the two passwords are not the same; nothing was written; run it again")
    return first


def protected_document(content: bytes, password: str) -> bytes:
    """Return a Word file encrypted as Word itself does it (AES-256); it opens with ``password`` alone.

    Raises:
        CannotProtect: It could not be encrypted, or what was made does not open again.
    """
    # Heavy, and only needed here.
    import msoffcrypto  # noqa: PLC0415
    from msoffcrypto.format.ooxml import OOXMLFile  # noqa: PLC0415

    made, opened = BytesIO(), BytesIO()
    try:
        OOXMLFile(BytesIO(content)).encrypt(password, made)
        again = msoffcrypto.OfficeFile(BytesIO(made.getvalue()))
        again.load_key(password=password, verify_password=True)
        again.decrypt(opened, verify_integrity=True)
    except Exception as error:  # whatever the library raises: nothing may leave unprotected
        raise CannotProtect(
            f"the document could not be protected ({type(error).__name__}); nothing was written"
        ) from None
    if opened.getvalue() != content:
        raise CannotProtect("the protected document does not open as it was; nothing was written")
    return made.getvalue()


def protected_bundle(files: Mapping[str, bytes], password: str) -> bytes:
    """Return a zip file encrypted with AES-256 that holds ``files``, their names hidden as well.

    Raises:
        CannotProtect: It could not be encrypted.
    """
    import pyzipper  # noqa: PLC0415 (heavy, and only needed here)

    made = BytesIO()
    try:
        with pyzipper.AESZipFile(made, "w", compression=pyzipper.ZIP_DEFLATED) as bundle:
            bundle.setpassword(password.encode())
            bundle.setencryption(pyzipper.WZ_AES, nbits=256)
            bundle.writestr(pyzipper.zipfile_aes.AESZipInfo(INSIDE, _EPOCH), plain_bundle(files))
    except Exception as error:  # whatever the library raises: nothing may leave unprotected
        raise CannotProtect(
            f"the bundle could not be protected ({type(error).__name__}); nothing was written"
        ) from None
    return made.getvalue()


def plain_bundle(files: Mapping[str, bytes]) -> bytes:
    """Return a zip file of ``files``; the same files give the same bytes."""
    made = BytesIO()
    with ZipFile(made, "w", ZIP_DEFLATED) as bundle:
        for name, content in files.items():
            part = ZipInfo(name, _EPOCH)
            part.compress_type = ZIP_DEFLATED
            bundle.writestr(part, content)
    return made.getvalue()


def protected(documents: Mapping[str, bytes], stem: str, password: str) -> dict[str, bytes]:
    """Return ``documents`` as they may leave: Word files encrypted, all else in ``<stem>-protected.zip``.

    Raises:
        CannotProtect: One of them could not be protected; then none may be written.
    """
    made = {
        name: protected_document(content, password)
        for name, content in documents.items()
        if name.endswith(".docx")
    }
    rest = {name: content for name, content in documents.items() if name not in made}
    if rest:
        made[f"{stem}-protected.zip"] = protected_bundle(rest, password)
    return made
