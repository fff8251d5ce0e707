"""The demos room."""
