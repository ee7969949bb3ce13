"""Small widgets, one a file. They paint what they are handed and work out nothing."""
