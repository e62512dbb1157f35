"""Makes the built-in templates; a tool for developers, not used when documents are drafted."""
