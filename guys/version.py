"""The program's version, in the one place that packaging, results and change notes read."""

__version__ = "0.3.0"
