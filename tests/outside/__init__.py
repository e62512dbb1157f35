"""What comes from outside: plugins that fail in every way."""
