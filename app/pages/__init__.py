"""The pages of the window, one module each, named as on the rail."""
