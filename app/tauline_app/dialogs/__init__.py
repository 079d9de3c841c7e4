"""Part of the window; see the modules."""
