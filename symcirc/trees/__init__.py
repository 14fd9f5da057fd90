"""The two-graph engine: numerator and denominator straight from the graph."""
