"""Solids of the fluids: an equation for each, and where each meets its liquid and its vapour."""
