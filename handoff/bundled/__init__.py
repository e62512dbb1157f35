"""The plugins that come with the tool, under one import name in a checkout and in a wheel.

In a wheel they lie in this folder; in a checkout they lie in ``plugins/`` beside ``handoff/``.
"""

from pathlib import Path

_checkout = Path(__file__).resolve().parents[2] / "plugins"
if _checkout.is_dir():
    __path__.append(str(_checkout))
