"""Tests of the fluid plugin."""
