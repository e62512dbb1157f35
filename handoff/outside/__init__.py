"""What comes from outside (a unit's plugin, a unit's template) runs in a process of its own, with limits."""
