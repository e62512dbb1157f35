"""Grey images of pages: read, looked at in blocks, and told apart with a tolerance."""

from __future__ import annotations

import zlib
from collections.abc import Iterator
from typing import NamedTuple

BLOCK = 6
"""Pixels of the side of a block; what moves less than that hardly changes the mean of one."""

UNLIKE, SHARE = 32, 0.03
"""A block is unlike another from this many of 255 steps of grey; pages differ from this share of their blocks."""

STEP = 32
"""Steps of grey that are kept as one: an image of a page is small, and the eye sees the same."""

SIGNATURE = b"\x89PNG\r\n\x1a\n"


class Grey(NamedTuple):
    """An image in steps of grey, row by row."""

    width: int
    height: int
    rows: tuple[bytes, ...]


def from_pgm(content: bytes) -> Grey:
    """Return a portable grey map (P5) of 255 steps."""
    kind, width, height, steps, pixels = content.split(maxsplit=4)
    size = int(width) * int(height)
    assert (kind, int(steps)) == (b"P5", 255)
    pixels = content[len(content) - size :]
    return _grey(int(width), int(height), pixels)


def to_png(image: Grey) -> bytes:
    """Return an image as a small PNG file: few steps of grey, rows without filter."""
    coarse = bytes(value // STEP * 255 // (255 // STEP) for value in range(256))
    rows = b"".join(b"\0" + row.translate(coarse) for row in image.rows)
    head = image.width.to_bytes(4) + image.height.to_bytes(4) + bytes((8, 0, 0, 0, 0))
    chunks = ((b"IHDR", head), (b"IDAT", zlib.compress(rows, 9)), (b"IEND", b""))
    return SIGNATURE + b"".join(_chunk(kind, data) for kind, data in chunks)


def from_png(content: bytes) -> Grey:
    """Return an image that :func:`to_png` wrote."""
    found = dict(_chunks(content.removeprefix(SIGNATURE)))
    width, height = (int.from_bytes(found[b"IHDR"][start : start + 4]) for start in (0, 4))
    packed = zlib.decompress(found[b"IDAT"])
    starts = range(0, len(packed), width + 1)
    assert not any(packed[start] for start in starts)
    return Grey(width, height, tuple(packed[start + 1 : start + 1 + width] for start in starts))


def difference(one: Grey, other: Grey) -> float:
    """Return the share of blocks, 0 to 1, in which two images are unlike; 1 for images of other sizes."""
    if (one.width, one.height) != (other.width, other.height):
        return 1.0
    pairs = list(zip(_blocks(one), _blocks(other), strict=True))
    return sum(abs(mean - another) >= UNLIKE for mean, another in pairs) / len(pairs)


def are_alike(one: Grey, other: Grey) -> bool:
    """Return whether two images show the same page, but for a few pixels."""
    return difference(one, other) < SHARE


def _chunks(content: bytes) -> Iterator[tuple[bytes, bytes]]:
    while content:
        length = int.from_bytes(content[:4])
        yield content[4:8], content[8 : 8 + length]
        content = content[12 + length :]


def _chunk(kind: bytes, data: bytes) -> bytes:
    return len(data).to_bytes(4) + kind + data + zlib.crc32(kind + data).to_bytes(4)


def _grey(width: int, height: int, pixels: bytes) -> Grey:
    return Grey(width, height, tuple(pixels[row * width : (row + 1) * width] for row in range(height)))


def _blocks(image: Grey) -> Iterator[float]:
    for top in range(0, image.height, BLOCK):
        band = image.rows[top : top + BLOCK]
        for start in range(0, image.width, BLOCK):
            pixels = [row[start : start + BLOCK] for row in band]
            yield sum(map(sum, pixels)) / sum(map(len, pixels))
