"""Entering a round: the fields in walk order, what is typed into each, what stands in the way, and the result.

No screen and no book here: the Watch pane draws this, the command line fills it, the tests try it.
A field is one line of the form: a single point, or a row typed as one list (the cylinders of an engine, or the sets
of a station).
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, field

from logbook.plant.catalogue import ReadingDefinition
from logbook.reading.finding import Finding
from logbook.reading.value import Value

Target = tuple[str, str]
"""subject (engine or `plant`) and `key` or `key.PLACE`"""


@dataclass(frozen=True, slots=True)
class Field:
    """One line of the form."""

    name: str
    """unique in the round, e.g. `ME/cylinder_exhaust_temperature`; the name in a draft"""
    label: str
    unit: str
    group: str
    """group of the walk"""
    definition: ReadingDefinition
    targets: tuple[Target, ...]
    """one for a single point; one for each place of a row, in the order they are typed"""

    @property
    def is_row(self) -> bool:
        return len(self.targets) > 1


@dataclass(frozen=True, slots=True)
class Understood:
    """What the text of a field means: a value for each target that has one, and what is to be asked."""

    values: Mapping[Target, Value]
    findings: tuple[Finding, ...] = ()

    @property
    def refused(self) -> bool:
        """Something in the text cannot be understood at all."""
        return any(finding.refused for finding in self.findings)


Understand = Callable[[Field, str, Mapping[Target, Value]], Understood]
"""field, text, values entered so far in this round -> what it means"""


@dataclass
class Round:
    """A round being entered. The position is the field in which the person is."""

    fields: tuple[Field, ...]
    understand: Understand
    last: Mapping[Target, Value] = field(default_factory=dict)
    """values of the reading before, by target"""
    texts: dict[str, str] = field(default_factory=dict)
    """by field name, as it was left"""
    accepted: dict[str, tuple[str, ...]] = field(default_factory=dict)
    """by field name: keys of the findings that the person accepted"""
    position: int = 0
    text: str = ""
    """what stands in the field now"""

    def __post_init__(self) -> None:
        self._asked: tuple[str, str] = ("", "")
        self._understood: dict[str, Understood] = {}
        for name in [name for name in self.texts if self._field_named(name) is None]:
            # A plant.toml that lost a point since: the text stays in the draft file, and is said by the pane.
            del self.texts[name]
        for item in self.fields:
            if item.name in self.texts:
                self._understood[item.name] = self.understand(item, self.texts[item.name], self.values())
        self.text = self.texts.get(self.fields[self.position].name, "") if self.fields else ""

    @property
    def current(self) -> Field:
        return self.fields[self.position]

    def values(self) -> dict[Target, Value]:
        """Every value entered so far, with the findings that were accepted."""
        found: dict[Target, Value] = {}
        for name, understood in self._understood.items():
            found |= self._with_accepted(name, understood)
        return found

    def _with_accepted(self, name: str, understood: Understood) -> dict[Target, Value]:
        accepted = self.accepted.get(name, ())
        return {
            target: value.accepting(*(key for key in accepted if self._concerns(understood, key, target)))
            for target, value in understood.values.items()
        }

    @staticmethod
    def _concerns(understood: Understood, key: str, target: Target) -> bool:
        return any(item.key == key and item.concerns(target[1]) for item in understood.findings)

    def preview(self) -> Understood:
        """What the text in the current field means, before it is left."""
        return self._try(self.text)

    def _try(self, text: str) -> Understood:
        if not text.strip():
            return Understood({})
        others = {
            target: value
            for name, understood in self._understood.items()
            if name != self.current.name
            for target, value in understood.values.items()
        }
        return self.understand(self.current, text, others)

    def leave(self, *, accept: bool = True) -> tuple[Finding, ...]:
        """Keep what stands in the field. Returns what is still asked; empty when the person may go on.

        The first time, findings are returned and the text is kept; leaving again with the same text accepts them
        (never those that are refused: such a text is kept in the draft, and has no value until it is mended).
        """
        name, text = self.current.name, self.text.strip()
        understood = self._try(text)
        if text:
            self.texts[name] = text
            self._understood[name] = understood
        else:
            self.texts.pop(name, None)
            self._understood.pop(name, None)
        open_findings = tuple(item for item in understood.findings if item.key not in self.accepted.get(name, ()))
        if not open_findings:
            self.accepted[name] = tuple(item.key for item in understood.findings)
            return ()
        if understood.refused or self._asked != (name, text) or not accept:
            self._asked = (name, text)
            return open_findings
        self.accepted[name] = tuple(dict.fromkeys(item.key for item in understood.findings))
        return ()

    def go(self, position: int) -> None:
        """Move to another field. Call `leave` first."""
        self.position = min(max(position, 0), len(self.fields) - 1)
        self.text = self.texts.get(self.current.name, "")

    def findings(self) -> dict[str, tuple[Finding, ...]]:
        """By field: everything asked about what was left, accepted or not."""
        return {name: item.findings for name, item in self._understood.items() if item.findings}

    def is_open(self, name: str) -> bool:
        """The field has a finding that nobody accepted yet, or a text that is not understood."""
        understood = self._understood.get(name)
        if understood is None:
            return False
        accepted = self.accepted.get(name, ())
        return understood.refused or any(item.key not in accepted for item in understood.findings)

    def open_fields(self) -> tuple[Field, ...]:
        """Fields that stand in the way of signing off."""
        return tuple(item for item in self.fields if self.is_open(item.name))

    def empty_fields(self) -> tuple[Field, ...]:
        return tuple(item for item in self.fields if item.name not in self.texts)

    def subjects(self) -> Sequence[str]:
        """Subjects that have a value, in the order of the walk."""
        return list(dict.fromkeys(subject for subject, _ in self.values()))

    def _field_named(self, name: str) -> Field | None:
        return next((item for item in self.fields if item.name == name), None)
