"""The pages of the documentation that are made from schemas and tables."""
