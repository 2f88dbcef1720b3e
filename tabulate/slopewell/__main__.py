"""``python -m slopewell``."""

from .cli import run

run()
