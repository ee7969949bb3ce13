"""What the readings mean: the charge as a best estimate, and the causes of a difference, ranked."""
