"""Trend: the excess over running hours with the events on its axis, companions as sparklines, the call in words."""

from __future__ import annotations

from collections.abc import Sequence

from logbook.answers.trend import TrendAnswer, segment_line, trend
from logbook.book.entry import Entry
from logbook.chart import Mark, chart
from logbook.panes.engine_pane import EnginePane
from logbook.panes.sparkline import shared_scale, sparkline

LEAST_SPAN_POINTS = 3.0
"""The chart is never higher than so many points of efficiency for noise alone."""
LEAST_SPAN_COMPANION = {"K": 20.0, "%": 6.0}
SPARK_WIDTH = 48


class TrendPane(EnginePane):
    def ask(self, engine: str, entries: Sequence[Entry]) -> TrendAnswer:
        return trend(self.session.plant, entries, engine)

    def lines(self, answer: TrendAnswer) -> Sequence[str]:
        lines = [f"{answer.engine}: {answer.sentences[0]}", *answer.sentences[1:]]
        if not answer.hours:
            return lines
        glyphs = self.session.glyphs
        marks = [Mark(event.hours, f"{event.word} {event.at_utc}") for event in answer.events if event.border]
        lines += [
            "",
            *chart(
                answer.hours,
                answer.excess_points,
                least_span=LEAST_SPAN_POINTS,
                y_label="excess, points of efficiency (up is worse)",
                x_label="running hours",
                marks=marks,
                glyphs=glyphs.name,
                width=78,
                height=13,
            ),
        ]
        if answer.companions:
            lines += ["", "Companions at equal load against the trial, daily medians, each on a scale of its own:"]
        for companion in answer.companions:
            point = self.session.plant.points[companion.key]
            cycle = self.session.plant.engine(answer.engine).cycle
            values = companion.deviation
            scale = shared_scale([values], LEAST_SPAN_COMPANION[companion.unit])
            picture = sparkline(values, SPARK_WIDTH, scale, glyphs)
            lines.append(f"{point.abbreviation_for(cycle):<9} {picture} {values[-1]:+7.1f} {companion.unit}")
        lines += ["", "Segments (points of efficiency in 1,000 running hours):"]
        lines += [f"  {segment_line(segment)}" for segment in answer.segments]
        return lines
