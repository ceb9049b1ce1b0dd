"""What a command cannot do, in one line."""

from __future__ import annotations


class CommandFailed(Exception):  # noqa: N818, it reads as what happened
    """Wrong arguments, or a file that cannot be written; the message is the user's line."""
