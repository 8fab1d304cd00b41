"""Force coefficients chosen from shapes, each with its source: the formulas by kind of body, and which of them a thing takes."""
