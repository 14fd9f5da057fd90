"""Masks: what a sheet's limits ask of a response, the loss of a response over their bands, and the least order."""
