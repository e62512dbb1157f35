"""Speed and memory as ratios against floors measured in the same run: ``python -m tests.bench``."""
