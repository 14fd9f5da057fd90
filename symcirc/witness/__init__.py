"""The numeric witness: a plain solve of the circuit, and its comparison with what was derived."""
