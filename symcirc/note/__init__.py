"""The design note: one document, written as LaTeX, HTML or PDF."""
