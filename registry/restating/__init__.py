"""The same correlation in other units and another log base."""
