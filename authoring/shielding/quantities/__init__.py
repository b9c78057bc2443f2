"""Stage: solve. One file per quantity; the registry is `MODULES` in `authoring/shielding/quantity.py`."""
