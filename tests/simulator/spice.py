"""Writing netlists of many isolated copies of one circuit, running ngspice on them, reading the answer."""

import shutil
import subprocess
import tempfile
from collections.abc import Mapping, Sequence
from pathlib import Path

import numpy as np
from numpy.typing import NDArray

from .gummel_poon import PARAMETERS, Devices

Floats = NDArray[np.float64]

OPTIONS_TRANSIENT = ".options noacct reltol=5e-4 itl1=500 itl4=60"
OPTIONS = ".options reltol=1e-5 vntol=1e-8 abstol=1e-13 itl1=500 itl4=50 noacct"


def available() -> bool:
    """Whether ngspice can be run here."""
    return shutil.which("ngspice") is not None


def models(devices: Devices, polarity: str) -> list[str]:
    """The .model lines: `qN` for the output and `dN` for the driver transistor of device N.

    The quasi-saturation charge QCO is left out: with it ngspice-39 stops at the first edge ("timestep too small").
    """
    lines = []
    for row in range(len(devices)):
        lines.append(_model(f"q{row}", devices.output, row, polarity))
        if devices.driver is not None:
            lines.append(_model(f"d{row}", devices.driver, row, polarity))
    return lines


def _model(name: str, parameters: Mapping[str, Floats], row: int, polarity: str) -> str:
    values = " ".join(f"{key.lower()}={float(parameters[key][row]):.9g}" for key in PARAMETERS)
    return f".model {name} {polarity} (tnom=25 quasimod=1 mje=0.35 mjc=0.4 {values})"


def transistor(devices: Devices, row: int, tag: str, t: float, sign: int = 1, leak: float = 0.0) -> list[str]:
    """Lines of device `row` between nodes c<tag>, b<tag> and 0; `sign` is −1 for a PNP."""
    lines = []
    if devices.driver is None:
        lines.append(f"q{tag} c{tag} b{tag} 0 q{row} temp={t:.5f}")
        if leak:
            lines.append(f"i{tag} c{tag} b{tag} {sign * leak:.9g}")
        return lines
    assert devices.r_driver is not None and devices.r_output is not None
    lines.append(f"q{tag} c{tag} m{tag} 0 q{row} temp={t:.5f}")
    lines.append(f"qd{tag} c{tag} b{tag} m{tag} d{row} temp={t:.5f}")
    for name, ends, ohms in (
        ("x", f"b{tag} m{tag}", devices.r_driver[row]),
        ("y", f"m{tag} 0", devices.r_output[row]),
    ):
        if np.isfinite(ohms):
            lines.append(f"r{name}{tag} {ends} {ohms:.9g}")
    if leak:
        lines.append(f"i{tag} c{tag} b{tag} {0.3 * sign * leak:.9g}")
        lines.append(f"ii{tag} c{tag} m{tag} {0.7 * sign * leak:.9g}")
    return lines


def run(
    title: str, lines: Sequence[str], analysis: str, save: Sequence[str] = (), patience: float = 120.0
) -> dict[str, Floats]:
    """Run one batch; every saved vector by name, shape (points,). Nothing when it takes over `patience` seconds.

    Raises RuntimeError when ngspice refuses the netlist.
    """
    keep = [f".save {' '.join(save[k : k + 40])}" for k in range(0, len(save), 40)]
    options = OPTIONS_TRANSIENT if analysis.startswith(".tran") else OPTIONS
    text = "\n".join([title, *lines, options, *keep, analysis, ".end", ""])
    with tempfile.TemporaryDirectory() as folder:
        deck, raw = Path(folder, "deck.cir"), Path(folder, "deck.raw")
        deck.write_text(text)
        command = ["ngspice", "-b", "-r", str(raw), str(deck)]
        try:
            done = subprocess.run(command, capture_output=True, text=True, timeout=patience, check=False)
        except subprocess.TimeoutExpired:
            return {}
        if not raw.exists() and analysis.startswith(".tran"):
            return {}  # gave up at the first point; the caller tries fewer circuits at once
        if not raw.exists():
            raise RuntimeError(f"ngspice gave no result for {title!r}:\n{done.stdout[-800:]}\n{done.stderr[-800:]}")
        return _read(raw.read_bytes())


def _read(data: bytes) -> dict[str, Floats]:
    """Vectors of a binary raw file (ngspice manual, section on the rawfile format)."""
    head, _, body = data.partition(b"Binary:\n")
    lines = head.decode().splitlines()
    count = {key: int(line.split(":")[1]) for line in lines for key in ("No. Variables", "No. Points") if key in line}
    first = lines.index("Variables:") + 1
    names = [line.split()[1].lower() for line in lines[first : first + count["No. Variables"]]]
    values = np.frombuffer(body, dtype=np.float64, count=count["No. Points"] * len(names))
    table = values.reshape(count["No. Points"], len(names))
    return {name: table[:, column] for column, name in enumerate(names)}
