"""A part: one orderable part number of one maker, as its record states it."""

from __future__ import annotations

from itertools import combinations
from typing import Annotated, Literal, get_args

from pydantic import Field, model_validator

from builder.problems import clipped
from builder.records.quantities import (
    BKelvin,
    Celsius,
    Day,
    DifferenceK,
    MilliWatt,
    MilliWattPerK,
    Ohm,
    PairC,
    Percent,
    RecordModel,
    Second,
    Several,
    SpanC,
    Text,
    WebAddress,
    refusal,
)
from builder.units import number_text, temperature_text

CurveSource = Literal["table", "steinhart-hart", "b-values", "b-value"]
StandingState = Literal["proposed", "approved", "restricted", "withdrawn"]
Lifecycle = Literal["active", "not for new designs", "last time buy", "obsolete"]
Column = Literal["t_c", "r_ohm", "r_min_ohm", "r_max_ohm", "ratio"]
Form = Literal["chip", "leaded", "bead", "probe", "lug", "disc"]
Figures = Literal["rated", "b_values", "steinhart_hart", "r_t_table", "accuracy", "limits", "qualification"]
FIGURES: tuple[Figures, ...] = get_args(Figures)

_SAME_WITHIN_K = 0.01  # closer temperatures are one, typed or converted differently


class Body(RecordModel):
    """How the part is built."""

    form: Form = Field(description="The kind of body.")
    size_code: Text | None = Field(None, description='Size code of a chip, in quotes: "0603".', examples=["0603"])

    @model_validator(mode="after")
    def _chip_has_a_size(self) -> Body:
        if self.form == "chip" and self.size_code is None:
            raise refusal(
                "missing-field", 'is missing, and the body is a chip. Add it in quotes, such as "0603".', "size_code"
            )
        return self


class Rated(RecordModel):
    """Zero-power resistance at the rated temperature."""

    resistance_ohm: Ohm = Field(
        description="Rated resistance: a number in Ω, or an R-K-M code.", examples=["10k", 4700]
    )
    at_c: Celsius = Field(25.0, description="Rated temperature, °C.", examples=[25])
    tolerance_pct: Percent | None = Field(None, description="Tolerance of the rated resistance, ± %.", examples=[1])


class BValue(RecordModel):
    """B(T1/T2) = ln(R1/R2) / (1/T1 − 1/T2), always with its pair of temperatures."""

    between_c: PairC = Field(description="The pair of temperatures, °C.", examples=[[25, 85]])
    b_k: BKelvin = Field(description="B-value, K.", examples=[3435])
    tolerance_pct: Percent | None = Field(None, description="Tolerance of the B-value, ± %.", examples=[1])

    @model_validator(mode="after")
    def _two_temperatures(self) -> BValue:
        if abs(self.between_c[0] - self.between_c[1]) < 1:
            pair = " and ".join(temperature_text(t_c) for t_c in self.between_c)
            raise refusal(
                "out-of-bounds", f"{pair} are less than 1 K apart. A B-value needs two temperatures.", "between_c"
            )
        return self


class SteinhartHart(RecordModel):
    """1/T = a + b·ln R + c·(ln R)³, R in ohm, T in kelvin."""

    a: float = Field(description="a, 1/K.", examples=[1.129e-3])
    b: float = Field(description="b, 1/K.", examples=[2.341e-4])
    c: float = Field(description="c, 1/K.", examples=[8.775e-8])
    span_c: SpanC = Field(description="Range over which the maker states the coefficients, °C.", examples=[[-40, 125]])


class RTTable(RecordModel):
    """The maker's table of resistance over temperature: rows here, or a CSV file beside the record."""

    columns: Several[Column] = Field(
        ("t_c", "r_ohm"),
        description="What each column holds: t_c with r_ohm (and r_min_ohm, r_max_ohm), or t_c with ratio, "
        "resistance over rated resistance.",
    )
    rows: Several[Several[float | str]] | None = Field(
        None,
        description="The rows, one a line, each with as many values as there are columns.",
        examples=[[[-40, 336000]]],
    )
    file: Text | None = Field(None, description="A CSV beside the record; its header row names the columns.")

    @model_validator(mode="after")
    def _rows_or_file(self) -> RTTable:
        if (self.rows is None) == (self.file is None):
            what = "neither rows nor file" if self.rows is None else "both rows and file"
            raise refusal("missing-field", f"the table has {what}. Give one of the two.")
        if self.rows is not None:
            problem = columns_problem(self.columns)
            if problem:
                raise refusal("table-columns", problem, "columns")
        return self


def columns_problem(columns: tuple[str, ...]) -> str:
    """What is wrong with a table's columns, as a sentence with its cure; empty where nothing is."""
    named, shown = set(columns), ", ".join(columns) or "nothing"
    if len(named) < len(columns):
        return f"{shown} names a column twice. Name each column once."
    if "t_c" not in named or ("r_ohm" in named) == ("ratio" in named):
        return f"{shown} makes no table. Give t_c with either r_ohm or ratio."
    if len(named & {"r_min_ohm", "r_max_ohm"}) == 1 or ("ratio" in named and len(named) > 2):
        return f"{shown} makes no band. Give r_ohm with both r_min_ohm and r_max_ohm, or neither."
    return ""


class Accuracy(RecordModel):
    """A tolerance stated in kelvin, for interchangeable parts."""

    between_c: SpanC = Field(description="Range over which it holds, °C.", examples=[[0, 70]])
    within_k: DifferenceK = Field(description="Largest deviation, ± K.", examples=[0.2])


class Limits(RecordModel):
    """What the part stands, and how it warms and follows."""

    operating_c: SpanC | None = Field(None, description="Operating range, °C.", examples=[[-40, 125]])
    max_power_mw: MilliWatt | None = Field(None, description="Largest power at 25 °C, mW.", examples=[100])
    dissipation_mw_per_k: MilliWattPerK | None = Field(None, description="Dissipation factor, mW/K.", examples=[1.0])
    time_constant_s: Second | None = Field(None, description="Thermal time constant, s.", examples=[4])
    medium: Text | None = Field(None, description="What the last two hold in.", examples=["still air"])


class Document(RecordModel):
    """What the figures were read from. Every revision that was used stays in the list; the newest of a title holds."""

    title: Text = Field(description="What it is; the same for all its revisions.", examples=["data sheet"])
    revision: Text | None = Field(None, description="Its revision, as text.", examples=["C"])
    dated: Day | None = Field(None, description="Its date, year-month-day.", examples=["2025-03-11"])
    link: WebAddress | None = Field(None, description="Its web address.", examples=["https://example.com/tb3a.pdf"])
    sha256: Annotated[str, Field(pattern="^[0-9a-f]{64}$")] | None = Field(
        None, description="SHA-256 of the file, 64 hex digits."
    )
    file: Text | None = Field(
        None, description="The document's file beside the record; the site gets a copy.", examples=["TB3A-103F38-C.pdf"]
    )
    figures: Several[Figures] = Field(
        (),
        description="Fields of the record that were read from it; what no document names was read from the newest "
        "revision of the first one.",
        examples=[["r_t_table"]],
    )


class DocumentRevision(RecordModel):
    """One revision of one of the part's documents, named as the part's `documents` name it."""

    title: Text = Field(description="The document's title.", examples=["data sheet"])
    revision: Text | None = Field(None, description="Its revision, as text; an approval needs it.", examples=["C"])

    def __str__(self) -> str:
        """As a sentence names it: `data sheet, revision C`."""
        return self.title if self.revision is None else f"{self.title}, revision {self.revision}"


class Standing(RecordModel):
    """One entry of the ledger: appended to, never edited; the last entry holds."""

    state: StandingState = Field(description="The approval state from this day on.")
    on: Day = Field(description="Day of the decision, year-month-day.", examples=["2026-02-10"])
    by: Text = Field(description="Who decided.", examples=["component engineering"])
    because: Text = Field(description="Why, in a sentence.")
    document: DocumentRevision | None = Field(
        None,
        description="The document that the decision rests on; approved and restricted need one, with its revision.",
        examples=[{"title": "data sheet", "revision": "C"}],
    )
    only_for: Several[Text] = Field(
        (), description="Positions or boards it may be fitted at, where it is restricted to some."
    )
    review_due: Day | None = Field(None, description="Day by which to look at it again.", examples=["2027-02-10"])


class Accepted(RecordModel):
    """A finding of the cross-checks that someone has looked at and lets stand; the part's page shows it."""

    rule: Text = Field(description="Name of the rule.", examples=["row-out-of-line"])
    row: Celsius | None = Field(
        None, description="The row's temperature, °C; without it every finding of the rule.", examples=[35]
    )
    because: Text = Field(description="Why it is right as it stands.", examples=["the maker confirmed the row"])


class Part(RecordModel):
    """One orderable part number of one maker."""

    part: Text = Field(description="The maker's part number, as text.", examples=["TB3A-103F38"])
    maker: Text = Field(description="Who makes it.", examples=["Tarnbrook Ceramics"])
    own_number: Text | None = Field(None, description="The team's internal number for the part.", examples=["HS-10473"])
    packaging_suffixes: Several[Text] = Field(
        (),
        description="What the maker adds to the number for the packaging alone: with it a bill of materials means this part.",
        examples=[["-TR", "/500"]],
    )
    description: Text | None = Field(None, description="What it is, in a line.")
    body: Body = Field(description="How it is built.")
    rated: Rated = Field(description="Rated resistance and temperature.")
    b_values: Several[BValue] = Field((), description="B-values, each with its pair.")
    steinhart_hart: SteinhartHart | None = Field(None, description="Steinhart–Hart coefficients stated by the maker.")
    r_t_table: RTTable | None = Field(None, description="The maker's R–T table.")
    accuracy: Several[Accuracy] = Field((), description="Tolerance in kelvin, where the maker states it so.")
    curve_from: CurveSource | None = Field(
        None, description="What the curve is made from; without it the first that the record has, in this order."
    )
    shape: Literal["typical", "plain"] = Field(
        "typical", description="How a curve from a single B-value bends: as real ceramics do, or not at all."
    )
    limits: Limits = Field(Limits(), description="What the part stands.")
    qualification: Several[Text] = Field(
        (), description="Qualifications that the maker states.", examples=[["AEC-Q200 grade 1"]]
    )
    lifecycle: Lifecycle = Field("active", description="Where the part is in its life.")
    documents: Several[Document] = Field((), description="What the figures were read from.")
    standing: Several[Standing] = Field((), description="The part's ledger.")
    accepted: Several[Accepted] = Field((), description="Findings of the cross-checks that stand as they are.")
    notes: Text | None = Field(None, description="Anything else worth knowing.")

    @model_validator(mode="after")
    def _has_its_curve(self) -> Part:
        sources = self.curve_sources()
        if not sources:
            cure = "Add b_values, steinhart_hart or r_t_table."
            raise refusal("no-curve", f"nothing says how the resistance falls with temperature. {cure}")
        if self.curve_from is not None and self.curve_from not in sources:
            has = " or ".join(sources)
            raise refusal("no-curve", f"the record has no {self.curve_from}. Write {has}.", "curve_from")
        return self

    @model_validator(mode="after")
    def _has_one_b_value_for_a_pair(self) -> Part:
        for b, other in combinations(self.b_values, 2):
            same_pair = all(map(_is_same, sorted(b.between_c), sorted(other.between_c)))
            if same_pair and b.b_k != other.b_k:
                values = " and ".join(f"{number_text(b_k)} K" for b_k in (b.b_k, other.b_k))
                pair = "/".join(map(number_text, b.between_c))
                cure = "Compare them with the data sheet, and leave one."
                raise refusal("repeated-b-value", f"{values} are both stated for {pair} °C. {cure}", "b_values")
        return self

    @model_validator(mode="after")
    def _names_each_document_once(self) -> Part:
        seen = set()
        for document in self.documents:
            name = DocumentRevision(title=document.title, revision=document.revision)
            if str(name).casefold() in seen:
                cure = "Give the newer one its own revision, or leave one."
                raise refusal("repeated-document", f"{clipped(str(name))} stands twice. {cure}", "documents")
            seen.add(str(name).casefold())
        return self

    def b_values_at_rated(self) -> tuple[BValue, ...]:
        """The B-values that share the rated temperature, one for each other temperature."""
        at = {
            self.other_c(b): b
            for b in reversed(self.b_values)
            if any(_is_same(t_c, self.rated.at_c) for t_c in b.between_c)
        }
        return tuple(at[t_c] for t_c in sorted(at))

    def other_c(self, b_value: BValue) -> float:
        """The temperature of a B-value's pair that is not the rated one. [°C]"""
        first, second = b_value.between_c
        return second if _is_same(first, self.rated.at_c) else first

    def curve_sources(self) -> tuple[CurveSource, ...]:
        """What the record's curve can be made from, the preferred one first."""
        has: dict[CurveSource, bool] = {
            "table": self.r_t_table is not None,
            "steinhart-hart": self.steinhart_hart is not None,
            "b-values": len(self.b_values_at_rated()) >= 2,
            "b-value": bool(self.b_values),
        }
        return tuple(source for source, held in has.items() if held)

    def state(self) -> StandingState | None:
        """The standing that holds: the last entry's; None where the ledger is empty."""
        return self.standing[-1].state if self.standing else None


def _is_same(t_c: float, other_c: float) -> bool:
    return abs(t_c - other_c) <= _SAME_WITHIN_K
