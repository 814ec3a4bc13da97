"""The command line: a skin over `registry.library`."""
