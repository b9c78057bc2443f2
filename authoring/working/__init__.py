"""Stage 0 of the engine, the lowest room: arithmetic and prose as nodes, exact numbers, and their three printers."""
