"""Results written to files for other programs to read."""
