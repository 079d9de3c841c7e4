"""Text of the document inside rich text."""

from __future__ import annotations


def plain(text: str) -> str:
    """Show what an author wrote as it is: nothing in it is mark-up."""
    return text.replace("&", "&amp;").replace("<", "&lt;")
