"""The document: values, quantities, the file, edits, and what is wrong with it."""
