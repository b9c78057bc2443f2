"""Stage 8, mark: scripts in, judgements out, the ledger that keeps them."""
