"""``python -m guys``."""

from guys.cli import main

main()
