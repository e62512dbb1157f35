"""``python -m handoff`` runs the command line."""

from handoff.cli import main

main()
