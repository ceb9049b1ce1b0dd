"""Tests and checks; ``python -m tests`` runs all of them."""
