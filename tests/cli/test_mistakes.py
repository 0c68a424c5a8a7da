"""What a user gets wrong: one clear line on standard error, the right exit code, never a traceback."""

import subprocess
import sys
from pathlib import Path

import pytest
from click.testing import CliRunner

from tui.cli import cli

from .support import ROOT, betafloor


@pytest.fixture(scope="module")
def files(tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("mistakes")
    (folder / "bad.toml").write_text("duty = 'switch'\n[supply\n")
    (folder / "duty.toml").write_text("duty = 'juggle'\n")
    (folder / "unit.toml").write_text("duty = 'switch'\n[supply]\nmin = '5 A'\nmax = '6 V'\n")
    (folder / "latin.toml").write_bytes(b"title = '\xe9'\n")
    (folder / "text.shelf").write_text("not a database\n" * 10)
    (folder / "none.csv").write_text("a,b\n1,2\n")
    return folder


@pytest.mark.parametrize(
    ("arguments", "code"),
    [
        (["rank", "missing.toml"], 2), (["rank", "{d}"], 2), (["rank", "{d}/bad.toml"], 2),
        (["rank", "{d}/duty.toml"], 2), (["rank", "{d}/unit.toml"], 2), (["rank", "{d}/latin.toml"], 2), (["rank"], 2),
        (["rank", "--top", "0", "x"], 2), (["rank", "{v}", "--json", "--csv"], 2),
        (["rank", "{v}", "--part", "ZZ-0"], 2), (["sheet", "ZZ-0", "{v}"], 2),
        (["sheet", "QZ-514", "{v}", "--json", "--html"], 2), (["sheet", "QZ-514", "{v}", "-o", "{d}/no/where.md"], 2),
        (["judge", "{v}", "--part", "QZ-514", "--network", "rb"], 2),
        (["judge", "{v}", "--part", "QZ-514", "--network", "rx=1"], 2),
        (["judge", "{v}", "--part", "QZ-514", "--network", "rb=-5"], 2),
        (["judge", "{v}", "--part", "QZ-514", "--network", "rbe=1k"], 2),
        (["judge", "{v}", "--part", "QZ-514", "--network", "rb=1 W"], 2), (["import", "missing.csv"], 2),
        (["import", "{d}"], 2), (["import", "{d}/none.csv"], 2), (["import", "--polarity", "up", "x.csv"], 2),
        (["part", "show", "ZZ-0"], 2), (["part", "set", "QZ-514", "structure", "triode"], 2),
        (["part", "set", "QZ-514", "colour", "red"], 2), (["stock", "issue", "ZZ-0", "--quantity", "1"], 2),
        (["stock", "receive", "QZ-514", "--quantity", "-1"], 2),
        (["stock", "receive", "QZ-514", "--quantity", "many"], 2), (["backup", "{d}/no/where.shelf"], 3),
        (["frobnicate"], 2), (["--shelf", "{d}/text.shelf", "check"], 3), (["--shelf", "{d}", "check"], 3),
        (["--shelf", "{d}/none.shelf", "check"], 3), (["--shelf", "{d}/no/s.shelf", "import", "{d}/none.csv"], 3),
        ([], 2), (["demo"], 2), (["demo", "--write", "{d}/bad.toml"], 2),
    ],
    ids=str,
)  # fmt: skip
def test_one_clear_line(demo: Path, files: Path, arguments: list[str], code: int) -> None:
    filled = [one.format(d=files, v=demo / "valve-solenoid.toml") for one in arguments]
    shelf = None if "--shelf" in filled else demo / "demo.shelf"
    done = CliRunner(env={"BETAFLOOR_SHELF": ""}).invoke(cli, ["--shelf", str(shelf), *filled] if shelf else filled)
    assert (done.exit_code, done.stdout) == (code, ""), done.output
    assert done.stderr.strip() and "Traceback" not in done.stderr
    complaint = [line for line in done.stderr.strip().splitlines() if not line.startswith(("Usage:", "Try "))]
    assert len([line for line in complaint if line]) == 1, done.stderr


def test_a_part_that_is_misspelt_is_answered_with_the_nearest(demo: Path) -> None:
    done = betafloor("part", "show", "QZ-51", shelf=demo / "demo.shelf")
    assert "QZ-51" in done.stderr and "nearest are" in done.stderr


def test_a_reader_that_stops_reading_is_no_error(demo: Path) -> None:
    command = f"'{sys.executable}' -m tui.cli --shelf '{demo / 'demo.shelf'}' rank '{demo / 'valve-solenoid.toml'}' --all | head -1"
    done = subprocess.run(["sh", "-c", command], text=True, capture_output=True, cwd=ROOT, check=False)
    assert done.stdout.startswith("#") and "Traceback" not in done.stderr and "BrokenPipe" not in done.stderr


def test_help_comes_without_the_heavy_libraries() -> None:
    code = (
        "import sys\nfrom click.testing import CliRunner\nfrom tui.cli import cli\n"
        "assert CliRunner().invoke(cli, ['--help']).exit_code == 0\n"
        "print([n for n in ('numpy', 'pandas', 'textual', 'pint', 'sqlite_utils') if n in sys.modules])"
    )
    done = subprocess.run([sys.executable, "-c", code], text=True, capture_output=True, cwd=ROOT, check=False)
    assert done.stdout.strip() == "[]", done.stderr
