"""Watch: enter a round. A draft is kept each time a field is left, and offered again after a dropped line."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from datetime import datetime
from typing import TYPE_CHECKING, ClassVar

from textual import on, work
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.widgets import Static

from logbook.book.book import BookUnusable
from logbook.book.drafts import Draft, DraftUnusable, Typed
from logbook.book.entry import NewEntry, reading_body
from logbook.panes.form import RoundForm
from logbook.panes.pane import Pane
from logbook.plant.walk import PLANT
from logbook.reading.entering import Round, Target
from logbook.reading.round import RoundPlan, begin, fields_of, plans_of, round_length, round_name, understanding
from logbook.reading.text import printable
from logbook.reading.value import Value

if TYPE_CHECKING:
    from logbook.panes.app import LogbookApp, Session


class WatchPane(Pane):
    """Choose a round, enter it, sign it off, see what it says."""

    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("o", "sign_off", "sign off", id="watch.sign_off"),
        Binding("enter", "resume", "on with the round", id="watch.resume"),
        Binding("x", "put_away", "another round", id="watch.put_away"),
        Binding("left", "shift(-1)", "an earlier round", id="watch.earlier"),
        Binding("right", "shift(1)", "a later round", id="watch.later"),
        *[Binding(str(digit), f"choose({digit})", show=False) for digit in range(1, 10)],
    ]
    can_focus = True

    def __init__(self, session: Session) -> None:
        super().__init__()
        self.session = session
        self.draft: Draft | None = None
        self.form: RoundForm | None = None
        self._choices: list[Draft | RoundPlan] = []
        self._earlier = 0
        """by how many rounds a new one lies before the one that ended last: a late entry"""
        self._signing = False
        self._editing = False
        """the keys go to the fields, not to the pane"""
        self._unkept = ""
        """why the last field could not be kept in the draft; empty when it was"""

    def compose(self) -> ComposeResult:
        yield Static(id="watch-list")

    @property
    def _app(self) -> LogbookApp:
        return self.app  # type: ignore[return-value]

    def shown(self) -> None:
        if self.form is not None:
            self._edit()
        else:
            self.screen.set_focus(self)
            self._offer()

    def _edit(self) -> None:
        """The keys go to the fields."""
        assert self.form is not None
        self._editing, self._signing = True, False
        self.screen.set_focus(self.form)
        self._app.show_keys(self)
        self._tell()

    # Choosing a round

    def _offer(self, *, before: Sequence[str] = ()) -> None:
        session = self.session
        lines = [*before, ""] if before else []
        if session.read_only:
            self._choices = []
            lines.append("This session may read and not write. The Book shows what was entered.")
            self._list(lines)
            return
        drafts, unreadable = session.drafts.unfinished(session.person)
        plans = plans_of(session.plant)
        choices: list[Draft | RoundPlan] = [*drafts, *plans]
        self._choices = choices[:9]
        lines += unreadable
        if drafts:
            lines.append("Unfinished:")
        for number, choice in enumerate(self._choices, 1):
            if isinstance(choice, Draft):
                lines.append(f"  {number}  go on with {printable(choice.round)}, {len(choice.fields)} fields entered")
            else:
                if number == len(drafts) + 1:
                    lines += ["New round (Left: an earlier one, for a late entry; Right: back):"]
                taken, offset = self._begin(choice)
                lines.append(f"  {number}  {round_name(choice, taken, offset)}")
        self._list(lines)
        self._app.show_keys(self)

    def _list(self, lines: Sequence[str]) -> None:
        self.query_one("#watch-list", Static).update("\n".join(lines).replace("[", r"\["))

    async def action_choose(self, digit: int) -> None:
        if self.form is not None or digit > len(self._choices):
            return
        choice = self._choices[digit - 1]
        session = self.session
        if isinstance(choice, RoundPlan):
            taken, offset = self._begin(choice)
            draft = Draft(
                person=session.person,
                round=round_name(choice, taken, offset),
                subjects=choice.subjects,
                occasion=choice.occasion,
                taken_utc=taken,
                utc_offset_min=offset,
            )
            same = [kept for kept in session.drafts.unfinished(session.person)[0] if kept.round == draft.round]
            draft = same[0] if same else draft
        else:
            draft = choice
        try:
            if not session.drafts.claim(draft):
                # The other session may be a frozen line of the same person: both keep what they type.
                draft = replace(draft, round=f"{draft.round} (second session)", fields=dict(draft.fields))
                session.drafts.claim(draft)
                self._app.say("Another session has this round open; this one is kept as a draft of its own.")
        except DraftUnusable as error:
            self._app.say(str(error))
            return
        await self._open(draft)

    def _begin(self, plan: RoundPlan) -> tuple[datetime, int]:
        now = self.session.now() - self._earlier * round_length(plan)
        return begin(self.session.plant, plan, now, self._offset_now())

    def action_shift(self, by: int) -> None:
        """New rounds lie one earlier or later; never after the one that ended last."""
        if self.form is None and not self.session.read_only:
            self._earlier = max(0, self._earlier - by)
            self._offer()

    def _offset_now(self) -> int:
        """Offset of the last entry in the book: the clock the ship kept last."""
        last = self.session.book.entries(kinds=["reading", "clock"], latest=1)
        return last[0].utc_offset_min if last else self.session.plant.utc_offset_min

    async def _open(self, draft: Draft) -> None:
        session = self.session
        last: dict[Target, Value] = {}
        last_at: dict[str, datetime] = {}
        for subject in (PLANT, *draft.subjects):
            entry = session.book.last_reading_before(subject, draft.taken_utc)
            if entry is not None:
                last_at[subject] = entry.taken_utc
                last |= {(subject, key): value for key, value in entry.values().items()}
        fields = fields_of(session.plant, draft.subjects, draft.occasion)
        names = [item.name for item in fields]
        lost = [name for name in draft.fields if name not in names]
        entering = Round(
            fields=fields,
            understand=understanding(session.plant, last, last_at, draft.taken_utc),
            last=last,
            texts={name: typed.text for name, typed in draft.fields.items() if name in names},
            accepted={name: typed.accepted for name, typed in draft.fields.items() if name in names},
            position=names.index(draft.position) if draft.position in names else 0,
        )
        self.draft = draft
        self.form = RoundForm(entering)
        self.query_one("#watch-list", Static).display = False
        await self.mount(self.form)
        self._edit()
        if lost:
            self._app.say(f"plant.toml no longer has {', '.join(lost)}: what was typed there stays in the draft.")

    # Entering

    @on(RoundForm.Left)
    def _keep(self) -> None:
        """Write the draft before anything is drawn: what was left is on the disk, whatever the line does now."""
        assert self.form is not None
        assert self.draft is not None
        entering, draft = self.form.entering, self.draft
        names = {item.name for item in entering.fields}
        kept = {name: typed for name, typed in draft.fields.items() if name not in names}
        draft.fields = kept | {
            name: Typed(text, entering.accepted.get(name, ())) for name, text in entering.texts.items()
        }
        draft.position = entering.current.name
        try:
            self.session.drafts.keep(draft)
        except DraftUnusable as error:
            self._unkept = str(error)
        else:
            self._unkept = ""

    @on(RoundForm.Typed)
    def _tell(self) -> None:
        """Beside the keys: what the draft could not keep, else what is asked about this field, else which round."""
        if self.form is None or self.draft is None:
            return
        entering = self.form.entering
        if self._unkept:
            self._app.say(self._unkept)
            return
        understood = entering.preview()
        accepted = entering.accepted.get(entering.current.name, ())
        asked = [item for item in understood.findings if item.key not in accepted]
        if asked and entering.text.strip():
            ending = "" if asked[0].refused else "  Enter again: it is so."
            self._app.say(f"{asked[0].sentence}{ending}")
        else:
            done = len(entering.texts)
            self._app.say(f"{printable(self.draft.round)}: {done} of {len(entering.fields)} fields")

    @on(RoundForm.LeaveRequested)
    def _to_keys(self) -> None:
        self._to_pane()
        self._app.say("The round is kept. Enter: on with it; o: sign off; or another pane.")

    @on(RoundForm.Finished)
    def _finished(self) -> None:
        self._to_pane()
        self.action_sign_off()

    def _to_pane(self) -> None:
        """The keys go to the pane."""
        self._editing, self._signing = False, False
        self.screen.set_focus(self)
        self._app.show_keys(self)

    def action_resume(self) -> None:
        if self.form is None:
            return
        if self._signing:
            self._sign()
            return
        self._edit()

    async def action_put_away(self) -> None:
        """Back to the choice of rounds; the draft stays."""
        if self.form is None:
            return
        await self._close_form()
        self._offer()

    async def _close_form(self) -> None:
        if self.form is not None:
            await self.form.remove()
        self.form, self.draft, self._signing, self._editing = None, None, False, False
        self.query_one("#watch-list", Static).display = True
        self.screen.set_focus(self)

    # Signing off

    def action_sign_off(self) -> None:
        if self.form is None:
            return
        entering = self.form.entering
        if not entering.values():
            self._app.say("Nothing is entered yet.")
            return
        waiting = entering.open_fields()
        if waiting:
            entering.go(entering.fields.index(waiting[0]))
            self.form.show_position()
            self._edit()
            return
        empty = entering.empty_fields()
        self._signing = True
        missing = (
            f"; empty: {', '.join(item.label for item in empty[:4])}{' ...' if len(empty) > 4 else ''}" if empty else ""
        )
        self._app.say(
            f"Sign off as {self.session.person}? {len(entering.values())} values{missing}. Enter: yes; Esc: no."
        )

    def _sign(self) -> None:
        assert self.form is not None
        assert self.draft is not None
        session, draft = self.session, self.draft
        by_subject: dict[str, dict[str, Value]] = {}
        for (subject, key), value in self.form.entering.values().items():
            by_subject.setdefault(subject, {})[key] = value
        entries = [
            NewEntry(
                kind="reading",
                subject=subject,
                taken_utc=draft.taken_utc,
                utc_offset_min=draft.utc_offset_min,
                person=session.person,
                identity_by=session.identity_by,
                round=draft.round,
                body=reading_body(draft.occasion, values),
            )
            for subject, values in by_subject.items()
        ]
        try:
            session.book.append_many(entries)
        except BookUnusable as error:
            self._app.say(f"{error} The draft is kept.")
            return
        session.drafts.finish(draft)
        self._after(draft, [entry.subject for entry in entries])

    @work(exclusive=True)
    async def _after(self, draft: Draft, subjects: list[str]) -> None:
        await self._close_form()
        number, _ = self.session.book.head()
        written = f"In the book: {printable(draft.round)}, entries up to {number}."
        self._offer(before=[written, "Working out the figures ..."])
        self._app.say("")
        self._answer(draft, subjects)

    @work(thread=True, exclusive=True, exit_on_error=False, group="answer")
    def _answer(self, draft: Draft, subjects: list[str]) -> None:
        """What the round says, worked out beside the screen: pandas is loaded here for the first time."""
        from logbook.answers.watch import round_says
        from logbook.panes.answering import answered

        try:
            lines = answered(
                self.session.folder,
                lambda entries: round_says(self.session.plant, entries, subjects, draft.taken_utc),
            )
        except Exception as error:
            lines = [f"The figures could not be worked out: {error}"]
        self.app.call_from_thread(self._show_answer, draft, lines)

    def _show_answer(self, draft: Draft, lines: list[str]) -> None:
        if self.form is None:
            self._offer(before=[f"In the book: {printable(draft.round)}", *lines])

    # Keys and help

    def keys_line(self) -> str:
        if self.session.read_only:
            return "l Ladder  t Trend  b Book  ? keys and cautions  q leave"
        if self.form is None:
            return "1-9 choose  l Ladder  t Trend  b Book  ? keys and cautions  q leave"
        if self._editing:
            return "Enter next  Up back  n N/R  s stopped  - not fitted  Esc other keys"
        return "Enter on with the round  o sign off  x another round  ? keys and cautions  q leave"

    def help_lines(self) -> Sequence[str]:
        return (
            "1-9           choose a round; Left, Right: an earlier one, for a late entry",
            "Enter         leave the field and go on; a second Enter accepts what is asked",
            "Up, Down      one field back or on; Page Up, Page Down by a screen",
            "n  s  b       in an empty field: N/R not read, stopped, stand-by",
            "f  d          not fitted, instrument defective",
            "row           one value a cylinder (or set), blanks between; - or s keeps a place",
            "620 E         an estimate: E follows it into every result",
            "ctrl+u        empty the field",
            "Esc           out of the fields; then: Enter on, o sign off, x another round",
            "Beside a field: the last reading and the difference; ? asked, ! accepted.",
        )

    def reason_to_stay(self) -> str:
        return ""
