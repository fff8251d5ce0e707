"""An equation-of-state engine for quantum gases."""

__version__ = "0.1.0"
