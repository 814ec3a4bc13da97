"""The database behind a library: append-only history, portable SQL."""
