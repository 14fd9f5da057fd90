"""The response of a stage as curves, and the curves as a picture or a table."""
