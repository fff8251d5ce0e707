"""The show room."""
