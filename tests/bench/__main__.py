"""Run the benches named, or all of them."""

import sys

from . import filing, painting, ranking

BENCHES = {"ranking": ranking.run, "filing": filing.run, "painting": painting.run}


def main(names: list[str]) -> int:
    """Exit code 2 for a bench that is not there."""
    unknown = [name for name in names if name not in BENCHES]
    if unknown:
        print(f"no bench {', '.join(unknown)}; there are {', '.join(BENCHES)}", file=sys.stderr)
        return 2
    for name in names or BENCHES:
        print(f"\n{name}")
        BENCHES[name]()
    return 0


raise SystemExit(main(sys.argv[1:]))
