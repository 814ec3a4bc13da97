"""Files made of answers, for other programs and other people."""
