"""How much to load: the same rules as of a written procedure, asked of a vessel before anything is written."""
