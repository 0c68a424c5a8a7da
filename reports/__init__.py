"""Results as text: rankings, calculation sheets, shortlists. The caller writes the file."""
