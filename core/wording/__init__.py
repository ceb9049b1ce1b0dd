"""Every sentence that a user reads about a result."""
