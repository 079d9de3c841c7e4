"""A scenario's changes, put into the text that it came from."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from pathlib import Path

from tauline.scenario.forms import table_of
from tauline.scenario.objects import Object, kind_of
from tauline.scenario.patch import Patch, same
from tauline.scenario.paths import join
from tauline.scenario.read import object_tables, parse, tables_of
from tauline.scenario.render import object_text, statements
from tauline.scenario.scenario import Scenario
from tauline.scenario.source import Source


class Rewriting:
    """One writing of a scenario into the text it came from."""

    def __init__(self, scenario: Scenario, source: Source) -> None:
        self.new = scenario
        self.old = parse(source.text, source.path).scenario
        self.tables = tables_of(source.text, source.path or Path("scenario"))
        self.patch = Patch(source.text)
        self.places = [
            place
            for place, _, table in object_tables(self.tables, self.patch.layout)
            if isinstance(table, dict)
        ]

    def text(self) -> str:
        """Return the text that says what the new scenario says."""
        self._change_head()
        kept = _matched(self.old.objects, self.new.objects)
        unfolded = self._unfolded(kept)
        for kind in unfolded:
            self.patch.remove(kind)
        added: dict[int, str] = {}
        for number, thing in enumerate(self.new.objects):
            old = kept.get(number)
            if old is None or kind_of(thing) in unfolded:
                added[number] = object_text(kind_of(thing), table_of(thing))
                kept.pop(number, None)
            else:
                self._change_object(self.old.objects[old], self.places[old], thing)
        return self._assembled(kept, added)

    # --- the head of the file -------------------------------------------------------------

    def _change_head(self) -> None:
        for name in ("title", "description"):
            value = getattr(self.new, name)
            if value != getattr(self.old, name):
                self._change_key("", name, value or None)
        units = {
            name: getattr(self.new.units, name)
            for name in ("time", "length")
            if getattr(self.new.units, name) != getattr(self.old.units, name)
        }
        if "units" in self.patch.layout.values and isinstance(self.tables["units"], dict):
            self.patch.change("units", self.tables["units"], self.tables["units"] | units)
        else:
            for name, unit in units.items():
                self._change_key("units", name, unit)
        self._change_parameters()

    def _change_parameters(self) -> None:
        old = {parameter.name: parameter.value for parameter in self.old.parameters}
        new = {parameter.name: parameter.value for parameter in self.new.parameters}
        if "parameters" in self.patch.layout.values and isinstance(self.tables["parameters"], dict):
            # written in one line, with what is no parameter kept
            there = self.tables["parameters"]
            rest = {name: value for name, value in there.items() if name not in old}
            self.patch.change("parameters", there, rest | new)
            return
        places = {name: number for number, name in enumerate(old)}
        before, reached = "", -1
        for name, value in new.items():
            if places.get(name, reached) < reached:
                self._change_key("parameters", name, None)
                self.patch.insert("parameters", name, value, before)
            elif name not in old or not same(old[name], value):
                self._change_key("parameters", name, value, before)
            before, reached = name, max(reached, places.get(name, -1))
        for name in old.keys() - new.keys():
            self._change_key("parameters", name, None)

    def _change_key(self, table: str, name: str, value: object, before: str | None = None) -> None:
        there = self.tables.get(table, {}) if table else self.tables
        path = join(table, name)
        if value is None:
            self.patch.remove(path)
        elif isinstance(there, dict) and name in there:
            self.patch.change(path, there[name], value)
        elif not table or table in self.tables:
            self.patch.insert(table, name, value, before)

    def _new_head_tables(self) -> str:
        """Tables of the head that the text does not have yet."""
        text = ""
        if "units" not in self.tables and self.new.units != self.old.units:
            units = {"time": self.new.units.time, "length": self.new.units.length}
            text += f"\n[units]\n{statements(units)}"
        if "parameters" not in self.tables and self.new.parameters:
            parameters = {parameter.name: parameter.value for parameter in self.new.parameters}
            text += f"\n[parameters]\n{statements(parameters)}"
        return text

    # --- objects --------------------------------------------------------------------------

    def _change_object(self, old: Object, place: str, new: Object) -> None:
        if old == new:
            return
        kind, _, number = place.rstrip("]").partition("[")
        before = self.tables[kind][int(number) - 1]
        self.patch.change(place, before, table_of(new, before))

    def _unfolded(self, kept: Mapping[int, int]) -> frozenset[str]:
        """Kinds written as one list in brackets, to which more is done than changing values."""
        order = [kept[number] for number in sorted(kept)]
        in_order = order == sorted(order)
        found = set()
        for kind in {kind_of(thing) for thing in self.old.objects}:
            if kind not in self.patch.layout.values:
                continue
            old = sum(kind_of(thing) == kind for thing in self.old.objects)
            new = [n for n, thing in enumerate(self.new.objects) if kind_of(thing) == kind]
            all_before = range(max(new, default=-1) + 1)
            stay = in_order and len(new) == old and all(n in kept for n in all_before)
            if not stay:
                found.add(kind)
        return frozenset(found)

    # --- the whole ------------------------------------------------------------------------

    def _assembled(self, kept: Mapping[int, int], added: Mapping[int, str]) -> str:
        """Put the text together: what is kept, in the new order, with what is added between."""
        pieces = self.patch.pieces()
        slots: dict[str, list[int]] = {}
        for number, piece in enumerate(pieces):
            slots.setdefault(piece.owner, []).append(number)
        contents = [self.patch.content(piece) for piece in pieces]
        ends = {number: slots[self.places[old]][-1] for number, old in kept.items()
                if self.places[old] in slots}  # fmt: skip
        self._take_out(contents, slots, kept)
        self._reorder(contents, slots, kept, ends, bool(added))

        objects = [slots[place][0] for place in self.places if place in slots]
        before_objects = min(objects, default=len(pieces)) - 1
        behind: dict[int, str] = {}
        head = max(slots.get("units", [0])[-1], 0)
        behind[head] = self._new_head_tables()
        last = before_objects
        for number in range(len(self.new.objects)):
            last = ends.get(number, last)
            if number in added:
                behind[last] = behind.get(last, "") + "\n" + added[number]

        text = ""
        for number, piece in enumerate(pieces):
            text = self._joined(text, contents[number])
            text = self._joined(text, behind.get(number, "").replace("\n", self.patch.newline))
            tail = self.patch.tail(piece)
            if not contents[number] and (text in ("", "\ufeff") or text.endswith("\n\n")):
                tail = tail.lstrip("\r\n")
            text = self._joined(text, tail)
        return text

    def _take_out(
        self, contents: list[str], slots: Mapping[str, list[int]], kept: Mapping[int, int]
    ) -> None:
        staying = set(kept.values())
        for old, place in enumerate(self.places):
            if old not in staying:
                for slot in slots.get(place, []):
                    contents[slot] = ""

    def _reorder(
        self,
        contents: list[str],
        slots: Mapping[str, list[int]],
        kept: Mapping[int, int],
        ends: dict[int, int],
        added: bool,
    ) -> None:
        """Where the order of the objects has changed, put their texts into each other's places.

        An object whose text is scattered among others is brought together for that, and where
        new ones are to stand between.
        """
        numbers = sorted(ends)
        order = [kept[number] for number in numbers]
        scattered = any(len(slots[self.places[old]]) > 1 for old in order)
        if order == sorted(order) and not (added and scattered):
            return
        texts = []
        for old in order:
            own = slots[self.places[old]]
            texts.append("".join(self._joined("", contents[slot]) for slot in own))
            for slot in own:
                contents[slot] = ""
        for number, old, text in zip(numbers, sorted(order), texts, strict=True):
            ends[number] = slots[self.places[old]][0]
            contents[ends[number]] = text

    def _joined(self, text: str, more: str) -> str:
        """Add to a text, on a line of its own."""
        if text not in ("", "\ufeff") and more and not text.endswith("\n"):
            text += self.patch.newline
        return text + more


def _matched(old: Sequence[Object], new: Sequence[Object]) -> dict[int, int]:
    """Which new object (by its index) is which old one.

    By id; of the others, those of one kind at the same place between the same neighbours.
    """
    names = {(kind_of(thing), thing.id): number for number, thing in enumerate(old)}
    found = {
        number: names[kind_of(thing), thing.id]
        for number, thing in enumerate(new)
        if (kind_of(thing), thing.id) in names
    }
    taken = set(found.values())
    left = _between([None if n in taken else kind_of(t) for n, t in enumerate(old)], old)
    for spot, number in _between(
        [None if n in found else kind_of(t) for n, t in enumerate(new)], new
    ).items():
        if spot in left:
            found[number] = left[spot]
    return found


def _between(
    kinds: Sequence[str | None], things: Sequence[Object]
) -> dict[tuple[str, str, int], int]:
    """Objects that have a kind here, by their kind, the last one without, and a running number."""
    spots: dict[tuple[str, str, int], int] = {}
    neighbour, count = "", 0
    for number, (kind, thing) in enumerate(zip(kinds, things, strict=True)):
        if kind is None:
            neighbour, count = thing.id, 0
        else:
            spots[kind, neighbour, count] = number
            count += 1
    return spots
