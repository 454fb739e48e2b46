"""What stands behind each command: it reads arguments, calls, prints; nothing is computed here."""
