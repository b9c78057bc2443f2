"""Press (stage 6): papers and keys become LaTeX, PDF, HTML and text; templates place, they never compute."""
