"""What real amplifiers do to a stage: exchanged inputs seen, first-order shifts, the margins of a loop."""
