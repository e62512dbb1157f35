"""Every slip of one key in the invented patients, and who notices it."""
