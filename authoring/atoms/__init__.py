"""Atoms, the second stage: subshells, configurations, species, and the measured data about them.

Stands on `working` (exact numbers, nodes) and `faults`; knows nothing of shielding.
"""
