"""What happens when a process is killed or the disk fails in the middle of a write."""
