.PHONY: help setup check test format bench

help:     ## what can be made
	@sed -n 's/^\([a-z]*\): *.*## /\1\t/p' Makefile

setup:    ## a virtual environment with everything for development
	python3 -m venv .venv && .venv/bin/pip install -c constraints.txt -e '.[test]'

check:    ## what CI runs, in the environment that is there
	.venv/bin/ruff check . && .venv/bin/ruff format --check . && .venv/bin/mypy && .venv/bin/lint-imports && .venv/bin/pytest

test:     ## the tests alone
	.venv/bin/pytest

format:   ## put the code in its form
	.venv/bin/ruff check --fix . ; .venv/bin/ruff format .

bench:    ## speed as ratios, printed and never asserted
	.venv/bin/python -m tests.bench
