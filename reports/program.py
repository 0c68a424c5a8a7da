"""What the program calls itself in documents."""

from importlib.metadata import PackageNotFoundError, version


def program() -> str:
    """Name and version, such as `betafloor 0.1.0`."""
    try:
        return f"betafloor {version('betafloor')}"
    except PackageNotFoundError:  # run from a checkout that was never installed
        return "betafloor"
