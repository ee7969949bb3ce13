"""Where the command line begins."""
