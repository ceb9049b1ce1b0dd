"""Pictures of results, drawn by the same code on the screen and in the report."""
