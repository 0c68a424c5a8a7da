"""How fast, as ratios of figures taken in one run: `python -m tests.bench [name …]`. Nothing here is asserted."""
