"""Stages 2 to 4, draw, vet and assemble: every variant of an item, the papers of a set, and their record."""
