"""A procedure on paper: one self-contained page for a printer, with the cards that hang at the bench."""
