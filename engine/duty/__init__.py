"""Duties: the kinds of circuit a requirement can ask for, found by importing this folder.

A duty is one module with a `DUTY`; nothing else lists them.
"""

import importlib
import pkgutil
from functools import cache

from .base import Duty


@cache
def duties() -> dict[str, Duty]:
    """Every duty by the name a requirement file uses."""
    found = {}
    for info in pkgutil.iter_modules(__path__):
        duty = getattr(importlib.import_module(f"{__name__}.{info.name}"), "DUTY", None)
        if isinstance(duty, Duty):
            found[duty.name] = duty
    return found
