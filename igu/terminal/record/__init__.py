"""What a script reads: the JSON contract, and tables by key."""
