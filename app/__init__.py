"""The window and the commands around the engine."""
