"""Input without sense or measure, from a seed: nothing it meets stops in any way but those documented."""
