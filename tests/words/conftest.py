"""No test of this folder fails because the machine was slow."""

from __future__ import annotations

import os

from hypothesis import settings

settings.register_profile("patient", deadline=None, derandomize=os.environ.get("CI") == "true")
settings.load_profile("patient")
