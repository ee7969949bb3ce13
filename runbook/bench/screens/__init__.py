"""Screens, one a file. Each gets its words ready-made and sends acts to the run."""
