"""The answer room."""
