"""The reading side of a working shift: due, since, note, ward, wording. Pure; the commands read and print."""
