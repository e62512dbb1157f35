"""The transfer packet: what goes with a patient to another hospital, as one set of files."""
