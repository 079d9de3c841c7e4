"""Tauline: spacetime diagrams from scenarios; the headless core."""

__version__ = "0.1.0"
