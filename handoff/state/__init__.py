"""The patient-state file: strict YAML, quantities, clock, and the validated state."""
