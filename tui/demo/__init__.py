"""The invented demo shelf: limits, stock and requirement files, read with importlib.resources."""
