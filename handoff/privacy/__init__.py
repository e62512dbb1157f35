"""What leaves the machine: protected by a password, without identifiers for teaching, confidential on its own sheet."""
