"""Stage: solve. Slips: misunderstandings as data, and the diagnosis that finds them in a value."""
