"""Tables of a property over a span of temperatures or pressures."""
