"""The commands and JSON that scripts rely on."""

import json
from pathlib import Path

import pytest

from .support import ROOT, betafloor

BOUNDS = {
    "vce_on_max", "ic_on_max", "ic_on_min", "ib_on_min", "ib_on_max", "drive_current_max", "forced_beta_max", "power_max",
    "tj_max", "ic_off_max", "vce_off_max", "t_on_max", "t_off_max",
}  # fmt: skip
RESULT = {
    "part", "structure", "package", "verdict", "evidence", "rank", "score", "stock", "reserved", "network", "bounds",
    "checks", "near_misses",
}  # fmt: skip
CHECK = {"name", "status", "evidence", "value", "limit", "unit", "headroom", "missing", "says"}


def strictly(text: str) -> dict:
    """JSON without the NaN and Infinity that Python's own reader would let through."""

    def refuse(word: str) -> float:
        raise AssertionError(word)

    return json.loads(text, parse_constant=refuse)


def test_rank_json_has_every_key(demo: Path) -> None:
    done = betafloor("rank", demo / "valve-solenoid.toml", "--all", "--json", shelf=demo / "demo.shelf")
    told = strictly(done.stdout)
    assert done.returncode == 0
    assert set(told) == {"program", "requirement", "policy", "shelf", "results"}
    assert told["shelf"]["parts"] == len(told["results"]) == 155 and len(told["shelf"]["fingerprint"]) == 16
    assert [one["rank"] for one in told["results"]] == list(range(1, 156))
    for one in told["results"]:
        assert set(one) == RESULT and set(one["bounds"]) == BOUNDS
        assert set(one["network"]) == {"rb", "rb_window", "rbe", "tolerance"}
        assert one["verdict"] in ("fits", "fits on typicals", "cannot say", "fails")
        for check in one["checks"]:
            assert set(check) == CHECK and check["status"] in ("pass", "fail", "unknown")
            assert not (check["status"] == "pass" and check["evidence"] == "missing")
        if one["verdict"] == "fits":
            assert all(check["status"] == "pass" for check in one["checks"])
        if one["verdict"] == "fails":
            assert any(check["status"] == "fail" for check in one["checks"])


def test_import_json_accounts_for_every_row(tmp_path: Path) -> None:
    file = ROOT / "tests" / "data" / "registered-types.csv"
    for accepted, unchanged in ((406, 0), (0, 406)):
        done = betafloor("import", file, "--json", shelf=tmp_path / "s.shelf")
        told = strictly(done.stdout)
        (one,) = told["files"]
        assert (told["parts"], one["form"], one["rows"]) == (20, "long", 409)
        assert (one["accepted"], one["unchanged"], one["set_aside"], one["rejected"]) == (accepted, unchanged, 3, 0)
        assert {"row", "column", "value", "kind", "says"} == set(one["problems"][0])


def test_part_show_json(registered: Path) -> None:
    told = strictly(betafloor("part", "show", "2N3019", "--json", shelf=registered).stdout)
    assert {"part", "structure", "package", "maker", "limits", "stock"} == set(told)
    gain = next(one for one in told["limits"] if one["symbol"] == "hFE" and one.get("ic") == 0.15 and one["max"])
    assert (gain["kind"], gain["min"], gain["max"], gain["vce"], gain["unit"]) == ("characteristic", 100, 300, 10, "")


def test_stock_commands(tmp_path: Path) -> None:
    shelf = tmp_path / "s.shelf"
    (tmp_path / "t.csv").write_text("part,polarity,VCEO,stock\nZQ-1,NPN,45,12\n")
    betafloor("import", tmp_path / "t.csv", shelf=shelf)
    assert betafloor("stock", "reserve", "ZQ-1", "--quantity", "2", "--job", "b", shelf=shelf).returncode == 0
    (line,) = json.loads(betafloor("stock", "list", "--json", shelf=shelf).stdout)
    assert (line["part"], line["on_hand"], line["reserved"], line["free"]) == ("ZQ-1", 12, 2, 10) and line["lots"]
    refused = betafloor("stock", "issue", "ZQ-1", "--quantity", "11", shelf=shelf)
    assert (refused.returncode, refused.stdout) == (2, "") and "10 free" in refused.stderr


def test_judge_takes_the_network_that_is_given(demo: Path) -> None:
    shelf, valve = demo / "demo.shelf", demo / "valve-solenoid.toml"
    chosen = strictly(betafloor("rank", valve, "--top", "1", "--json", shelf=shelf).stdout)["results"][0]
    network = f"rb={chosen['network']['rb']}"
    judged = betafloor("judge", valve, "--part", chosen["part"], "--network", network, "--json", shelf=shelf)
    (again,) = strictly(judged.stdout)["results"]
    assert judged.returncode == 0 and again["bounds"] == chosen["bounds"] and again["checks"] == chosen["checks"]
    weak = betafloor("judge", valve, "--part", chosen["part"], "--network", "rb=220k,rbe=1k", shelf=shelf)
    assert weak.returncode == 1 and "fail" in weak.stdout


def test_shortlists_and_documents(demo: Path, tmp_path: Path) -> None:
    shelf = tmp_path / "s.shelf"
    shelf.write_bytes((demo / "demo.shelf").read_bytes())
    valve = demo / "valve-solenoid.toml"
    part = strictly(betafloor("rank", valve, "--top", "1", "--json", shelf=shelf).stdout)["results"][0]["part"]
    assert betafloor("shortlist", "save", valve, "--part", part, shelf=shelf).returncode == 0
    assert json.loads(betafloor("shortlist", "list", "--json", shelf=shelf).stdout)[0]["parts"] == [part]
    for form, start in (("--markdown", "# Shortlist"), ("--csv", "rank,part"), ("--json", "{")):
        assert betafloor("shortlist", "export", valve, "--part", part, form, shelf=shelf).stdout.startswith(start)
    for form, start in (("--markdown", f"# {part}"), ("--html", "<!DOCTYPE html>"), ("--json", "{")):
        assert betafloor("sheet", part, valve, form, shelf=shelf).stdout.startswith(start)
    target = tmp_path / "sheet.md"
    done = betafloor("sheet", part, valve, "--output", target, shelf=shelf)
    assert (done.stdout, done.returncode) == ("", 0) and target.read_text(encoding="utf-8").startswith(f"# {part}")
    assert betafloor("backup", tmp_path / "copy.shelf", shelf=shelf).returncode == 0
    assert betafloor("check", shelf=tmp_path / "copy.shelf").stdout == "the shelf is sound\n"


@pytest.mark.parametrize("name", ["coil-24v-low-side", "load-12v-high-side", "heater-24v-350ma"])
def test_registered_types_come_out_as_an_engineer_expects(registered: Path, name: str) -> None:
    """The expectations are worked out by hand in the comments of each requirement file."""
    file = ROOT / "tests" / "requirements" / f"{name}.toml"
    told = strictly(betafloor("rank", file, "--all", "--json", shelf=registered).stdout)
    verdicts = {one["part"]: one["verdict"] for one in told["results"]}
    expected = 0
    for line in file.read_text(encoding="utf-8").splitlines():
        if not line.startswith("# expect "):
            continue
        wanted, _, parts = line.removeprefix("# expect ").partition(":")
        for part in parts.split(","):
            expected += 1
            verdict = verdicts[part.strip()]
            assert verdict != "fits" if wanted == "not fits" else verdict == wanted, (part, verdict)
    assert expected == 20


@pytest.mark.parametrize(
    ("name", "code"),
    [
        ("valve-solenoid", 0), ("pump-relay", 0), ("grow-lamp-indicator", 0),
        ("fan-supply", 0), ("soil-probe", 0), ("heating-mat", 1),
    ],
)  # fmt: skip
def test_the_demo_requirements_are_answered(demo: Path, name: str, code: int) -> None:
    done = betafloor("rank", demo / f"{name}.toml", shelf=demo / "demo.shelf")
    assert done.returncode == code and done.stdout and "155 parts" in done.stderr


@pytest.mark.parametrize(("name", "starts"), [("a.csv", "rank,part,"), ("a.json", "{"), ("a.md", "# ")])
def test_a_document_is_what_its_name_says(demo: Path, tmp_path: Path, name: str, starts: str) -> None:
    done = betafloor("shortlist", "export", demo / "valve-solenoid.toml", "--part", "QZ-514", "-o", tmp_path / name,
                     shelf=demo / "demo.shelf")  # fmt: skip
    assert done.returncode == 0, done.stderr
    assert (tmp_path / name).read_text(encoding="utf-8").startswith(starts)
    done = betafloor(
        "sheet", "QZ-514", demo / "valve-solenoid.toml", "-o", tmp_path / "s.csv", shelf=demo / "demo.shelf"
    )
    assert done.returncode == 2 and "s.csv" in done.stderr
