"""From a stage and a target to design equations: see :func:`symcirc.match.solve.solve`."""
