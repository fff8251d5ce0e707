"""The symbolic room."""
