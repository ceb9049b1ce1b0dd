"""The only place that runs the engine off the thread of the window."""
