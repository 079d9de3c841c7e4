"""Figures and tables as files."""
