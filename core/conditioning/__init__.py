"""Filters that leave ST where it is: each module says what it does to ST and why."""
