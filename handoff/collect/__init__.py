"""Ticks of a care plan that was filled on screen, read back into the patient file."""
