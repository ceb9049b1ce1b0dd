"""Invented recordings and the code that makes them."""
