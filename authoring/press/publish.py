"""Press: everything that a set prints, written into a folder."""
