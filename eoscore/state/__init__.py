"""The state room."""
