"""Make the sample recordings: an invented heart in an invented trunk."""
