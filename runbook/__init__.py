"""Guides a live demonstration with a sealed, weighed charge through boiling and its critical point."""

__version__ = "0.1.0"
