"""`python -m crossplan` does what `crossplan` does."""

from crossplan.cli.app import main

main()
