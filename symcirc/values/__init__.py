"""From a design to parts that can be bought: see :func:`symcirc.values.find.find_values`."""
