"""From a value back to the temperature that has it."""
