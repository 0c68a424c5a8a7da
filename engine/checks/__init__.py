"""One file a check; found by importing the folder, nothing else to edit."""
