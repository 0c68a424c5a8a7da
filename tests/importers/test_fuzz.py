"""Mangled files: read, or refused in one line, and never half on the shelf."""

import random
from pathlib import Path

import pytest

from db.store import Store
from importers.problem import ReadError
from importers.read import read_bytes

LINES = (Path(__file__).parents[1] / "data" / "registered-types.csv").read_bytes().splitlines(keepends=True)[:40]
WIDE = b"part,type,VCEO,IC [mA],HFE_MIN,HFE_IC,VCESAT_MAX,VCESAT_IC,VCESAT_IB,stock\nQ1,NPN,45,800,100,0.1,0.3,0.15,0.015,5\n"
ODD = [
    b"\0",
    b'"',
    b"\xff\xfe",
    b"1e999",
    b"-",
    b",,,,",
    b"\r",
    b"9" * 400,
    b"=1+1",
    b"\xc2\xb5",
    b"nan",
    b"<",
    b"\n\n",
]


def mangled(seed: int) -> bytes:
    """One of the two tables with a few wounds."""
    chance = random.Random(seed)
    data = bytearray(b"".join(LINES) if seed % 3 else WIDE)
    for _ in range(chance.randint(1, 6)):
        place = chance.randrange(len(data) or 1)
        wound = chance.randrange(5)
        if wound == 0 and data:
            data[place] = chance.randrange(256)
        elif wound == 1:
            data[place:place] = chance.choice(ODD)
        elif wound == 2:
            del data[place : place + chance.randrange(200)]
        elif wound == 3:
            rows = bytes(data).split(b"\n")
            chance.shuffle(rows)
            data = bytearray(b"\n".join(rows))
        else:
            data = bytearray(bytes(data).replace(b",", chance.choice([b";", b"\t", b",", b"|"])))
    return bytes(data)


@pytest.mark.parametrize("block", range(8))
def test_two_thousand_mangled_files(block: int, tmp_path: Path) -> None:
    read = refused = 0
    with Store.open(tmp_path / "s.shelf") as store:
        for seed in range(block * 250, block * 250 + 250):
            try:
                reading = read_bytes(mangled(seed), "mangled.csv")
            except ReadError as error:
                refused += 1
                assert "\n" not in str(error).strip()
                continue
            read += 1
            assert reading.rows >= len(reading.arrivals)
            if seed % 5 == 0:
                landed = store.land(reading.arrivals, file="m", sha256=reading.sha256, dry_run=seed % 10 == 0)
                total = landed.accepted + landed.unchanged + landed.set_aside + len(landed.refused)
                assert total == len(reading.arrivals)
        assert store.check() == []
    assert read and refused
