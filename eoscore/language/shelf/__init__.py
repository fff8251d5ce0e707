"""The language/shelf room."""
