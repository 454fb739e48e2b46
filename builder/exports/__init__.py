"""Text and files for people and other programs."""
