"""Stage: solve. One file per command word; a task turns a part of an item into a question with its working."""
