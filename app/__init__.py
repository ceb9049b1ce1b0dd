"""Samespot's command line, workstation and report."""
