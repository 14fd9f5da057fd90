"""Answers written out: for people, for scripts (JSON) and for documents (LaTeX)."""
