"""The command ``samespot``: one module a command, errors to exit statuses."""
