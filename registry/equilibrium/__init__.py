"""Lines of equilibrium between two phases: slope, volumes, enthalpy."""
