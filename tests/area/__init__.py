"""Tests of the area plugin."""
