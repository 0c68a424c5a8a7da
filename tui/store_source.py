"""The shelf file behind the interface; the store is imported in the thread that first asks it."""

import json
from collections.abc import Callable, Iterator, Mapping, Sequence
from contextlib import contextmanager
from dataclasses import asdict
from pathlib import Path
from typing import TYPE_CHECKING

from .source import SourceError

if TYPE_CHECKING:
    from db.store import Store
    from engine.part import Part
    from engine.ranking import Ranking
    from engine.shelf import Shelf


class StoreSource:
    """A shelf file, opened for each question; `prepare` makes it before the first one is asked."""

    def __init__(self, path: Path, prepare: Callable[[], object] | None = None) -> None:
        self.path = path
        self._prepare = prepare

    @property
    def name(self) -> str:
        return self.path.name

    @contextmanager
    def _open(self) -> Iterator["Store"]:
        from db.errors import StoreError
        from db.store import Store

        try:
            with Store.open(self.path) as store:
                yield store
        except StoreError as error:
            raise SourceError(str(error)) from error
        except OSError as error:
            raise SourceError(f"{self.path}: {error.strerror or error}; check the name and the rights") from error

    def shelf(self) -> "Shelf":
        prepare, self._prepare = self._prepare, None
        if prepare is not None:
            prepare()
        with self._open() as store:
            return store.shelf()

    def part(self, type_number: str) -> "Part":
        with self._open() as store:
            return store.part(type_number).part

    def requirements(self) -> Mapping[str, str]:
        """Saved requirements, the newest of a title: title → TOML text."""
        with self._open() as store:
            return {one.title: one.toml for one in reversed(store.requirements())}

    def keep_requirement(self, title: str, toml: str) -> str:
        with self._open() as store:
            store.save_requirement(title, toml)
        return f"Saved in {self.path.name}: {title}"

    def keep_shortlist(self, ranking: "Ranking", rows: Sequence[int], weights: Mapping[str, float]) -> str:
        from db.shortlists import Entry
        from engine.explain import explain
        from importers.requirement_file import to_toml
        from reports.program import program

        entries = []
        for rank, row in enumerate(rows, 1):
            told = explain(ranking.requirement, ranking.shelf, row)
            entries.append(Entry(rank, told.part, told.verdict, json.dumps(asdict(told), ensure_ascii=False)))
        title = ranking.requirement.title or "without a title"
        with self._open() as store:
            requirement = store.save_requirement(title, to_toml(ranking.requirement, weights))
            number = store.save_shortlist(requirement, ranking.policy, program(), ranking.shelf.fingerprint, entries)
        return f"Saved as shortlist {number} in {self.path.name}: {len(entries)} parts"
