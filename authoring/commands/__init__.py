"""Stage 9, the commands: one thin file each: arguments, one call, print, exit code."""
