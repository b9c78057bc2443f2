"""Stage 1, read: YAML and CSV as people write them become items, plans and rosters that know their places."""
