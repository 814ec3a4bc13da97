"""Loading and dumping libraries in open formats."""
