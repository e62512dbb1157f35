"""Mutation testing: one small change at a time to the code, and a test must notice it."""
