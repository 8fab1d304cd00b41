"""Studies: the same line run many times.  They compute no mechanics of their own."""
