"""The gas room."""
