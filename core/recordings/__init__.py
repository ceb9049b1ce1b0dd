"""Recordings: twelve leads of one person, and the files that hold them."""
