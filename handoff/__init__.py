"""From one patient-state file to a burn nurse's handover and care plan."""

__version__ = "0.1.0"
