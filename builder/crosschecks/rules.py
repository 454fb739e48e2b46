"""Every rule of the cross-checks: its name, what it looks for, an example, and how to settle what it finds."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True)
class Rule:
    """A rule; the three texts make its page in the site. What is never right cannot be accepted."""

    name: str
    looks_for: str
    example: str
    settled_by: str
    acceptable: bool = True


RULES = (
    Rule(
        "row-out-of-line",
        "A row of an R–T table that its neighbours do not expect: its resistance (or its minimum or maximum), read through the "
        "curve of the rows around it, belongs to another temperature, by more than the table's rounding and its own roughness "
        "explain. Where one slip explains it, the message says which, and the value that it restores: one digit, two digits "
        "swapped, a decimal place, a comma for a point, a repeated neighbour, a resistance left out so that all later rows are "
        "one row off, a temperature mistyped.",
        "6830 Ω at 35 °C between 8057 Ω at 30 °C and 5327 Ω at 40 °C, where 6530 Ω is expected: one digit differs.",
        "Compare the row with the data sheet and correct it. Where the data sheet itself has the value, ask the maker, and accept "
        "the finding in the record with the reason.",
    ),
    Rule(
        "not-falling",
        "A resistance that does not lie below the one of the row before. The resistance of an NTC thermistor falls with temperature.",
        "8057 Ω at 30 °C, followed by 8530 Ω at 35 °C.",
        "Compare both rows with the data sheet. A table that does not fall makes no curve, so it is an error.",
        acceptable=False,
    ),
    Rule(
        "repeated-temperature",
        "A temperature that stands twice, or rows that are not in order.",
        "35 °C in two rows one after the other.",
        "Remove the row that was typed twice, or correct its temperature.",
        acceptable=False,
    ),
    Rule(
        "uneven-step",
        "One step that is wider than all others of an otherwise even table: a row was left out.",
        "Rows at 25, 30, 40 and 45 °C.",
        "Add the missing row from the data sheet. Where the maker's table has the gap, accept the finding.",
    ),
    Rule(
        "units-look-wrong",
        "Values that make a thermistor only when they are read in another unit: kΩ typed as Ω (in the whole table or from some "
        "row on), °F or kelvin typed as °C, Steinhart–Hart coefficients meant for R over the rated resistance, for kΩ or for the "
        "decimal logarithm.",
        "A table with 10 at 25 °C in a record whose rated resistance is 10 kΩ.",
        "Convert the values; the message says how. It is an error, since nobody can use the curve.",
        acceptable=False,
    ),
    Rule(
        "rated-differs",
        "The table, or the stated coefficients, do not have the rated resistance at the rated temperature.",
        "A table with 10230 Ω at 25 °C in a record whose rated resistance is 10 kΩ.",
        "Compare both with the data sheet. Often the table belongs to another part.",
    ),
    Rule(
        "b-differs",
        "The table, or the stated coefficients, have another B-value than the record states for the same pair.",
        "b_values with B25/85 = 3435 K beside a table whose rows at 25 and 85 °C give 3977 K.",
        "Compare both with the data sheet. A smooth table of the wrong part shows itself only so.",
    ),
    Rule(
        "coefficients-differ",
        "The stated Steinhart–Hart coefficients read more than 0.3 K off the record's own table.",
        "A coefficient with one digit mistyped, or coefficients of another part.",
        "Compare the coefficients and the table with the data sheet. The curve is made from the table.",
    ),
    Rule(
        "no-curve-here",
        "B-values, Steinhart–Hart coefficients or a table's ends that lead to no resistance, or to one that does not fall with "
        "temperature, somewhere in the range that the curve is for.",
        "B25/50 = 3380 K beside B25/85 = 4335 K, where 3435 K was meant: the coefficient b of the law through their points is "
        "below zero, and no temperature has a resistance.",
        "Compare the figures that the message names with the data sheet. Nobody can use such a curve, so it is an error.",
        acceptable=False,
    ),
    Rule(
        "bend-unlikely",
        "Two B-values at the rated temperature that bend the curve as no ceramic does. The bend, in K², is the difference of both "
        "over the distance of their other temperatures in 1/T; of fourteen public tables it is −275000 to −30000 K². Outside "
        "−600000 to 50000 K² it is told, with 1 K allowed for rounding.",
        "B25/50 = 3936 K and B25/85 = 4300 K, where 3977 K was meant: they bend the curve by −1200000 K².",
        "Compare both with the data sheet: often one digit differs, or one of them is of another part or pair. Where the data "
        "sheet has both, ask the maker, and accept the finding with the reason.",
    ),
    Rule(
        "b-order",
        "B-values that do not rise with their upper temperature. In real ceramics B25/50 < B25/85 < B25/100; a table whose local "
        "B-value is the same everywhere was computed from one B-value, not measured.",
        "B25/50 = 3435 K and B25/85 = 3435 K.",
        "Compare with the data sheet: were two values exchanged? For a computed table ask the maker for a measured one; until then "
        "accept the finding, and do not trust the table far from the rated temperature.",
    ),
    Rule(
        "band-does-not-hold-nominal",
        "A minimum above the nominal value, or a maximum below it.",
        "r_min_ohm 6612 beside r_ohm 6530.",
        "Compare the row with the data sheet; often two columns are exchanged.",
    ),
    Rule(
        "tolerance-missing",
        "The tolerance of the rated resistance or of the B-value is not stated, and neither minimum and maximum columns nor "
        "an accuracy in kelvin takes its place. The band is then narrower than the truth.",
        "b_values: [{between_c: [25, 85], b_k: 3435}] with nothing else that says how far B may lie off.",
        "Add tolerance_pct from the data sheet. Where the data sheet is silent, ask the maker; zero is never assumed.",
    ),
    Rule(
        "outside-operating",
        "The stated operating range reaches beyond what the curve is known for.",
        "A table from −30 to 105 °C in a part that is stated to operate from −40 to 125 °C.",
        "Ask the maker for the missing rows, or narrow operating_c to what the figures cover.",
    ),
    Rule(
        "bends-back",
        "The Steinhart–Hart coefficient c is zero or negative: the curve bends against what ceramics do.",
        "steinhart_hart: {a: 1.2e-3, b: 2.2e-4, c: -4.1e-8, span_c: [0, 70]}",
        "Compare the three coefficients with the data sheet; often two points lay too close together when they were made.",
    ),
    Rule(
        "document-missing",
        "No document is named that the figures were read from.",
        "A record without documents.",
        "Name the data sheet with its revision and date.",
    ),
    Rule(
        "review-overdue",
        "The entry that holds for a part, or for an alternate at its position, names a day of review that has passed.",
        "review_due: 2026-02-10, and today is later.",
        "Review the part or the alternate, then append an entry with the outcome and the next day of review.",
    ),
    Rule(
        "review-before-decision",
        "A day of review that lies before the decision.",
        "on: 2026-02-10 with review_due: 2026-01-10, where 2027-01-10 was meant.",
        "Correct the day of review.",
        acceptable=False,
    ),
    Rule(
        "ledger-order",
        "An entry with a day before that of the entry above it. Entries are appended as decisions are made, and the last one holds.",
        "on: 2025-02-10 below an entry of 2026-01-12.",
        "Correct the date, or move the entry to its place.",
        acceptable=False,
    ),
    Rule(
        "future-entry",
        "An entry dated after today. It holds already, since the last entry does whatever its day.",
        "on: 2062-02-10, where 2026-02-10 was meant.",
        "Correct the date; append what is decided for later on its day.",
        acceptable=False,
    ),
    Rule(
        "approval-document",
        "An approved or restricted entry that names no document with its revision, or any entry that names a revision which the "
        "part's documents do not have. An approval means the part as one revision describes it. Earlier entries are looked "
        "at as the last one is.",
        "state: approved without document, or document: {title: data sheet, revision: D} where documents end with revision C.",
        "Name the revision that the decision rests on. Revisions that entries name stay in documents, below them the newer ones.",
        acceptable=False,
    ),
    Rule(
        "document-after-decision",
        "An entry rests on a revision that is dated after its day: nobody can have looked at it then.",
        "Approved on 2026-03-02 on revision C, which documents date 2026-05-04.",
        "Correct the day that is wrong, or name the earlier revision. Where a draft was looked at, accept the finding and say so.",
    ),
    Rule(
        "revision-replaced",
        "The entry that holds for a part, or for an alternate at its position, rests on a revision that a newer one in documents has "
        "replaced. The newest is the one with the latest date; where a revision has no date, the last of that title.",
        "Approved on revision B of the data sheet; documents have revision C too.",
        "Compare both revisions, then append an entry that rests on the newer one, or withdraws. It cannot be accepted: that would "
        "silence every later revision too.",
        acceptable=False,
    ),
    Rule(
        "approval-of-errors",
        "A part is approved or restricted, and its record has errors, also where they keep the record from being read. The errors "
        "themselves stop a build; this warning beside them says that people rely on the part meanwhile. Errors in the ledger do "
        "not count.",
        "b_k: 34350 in the record of an approved part.",
        "Correct the errors. Where a figure changes that someone may have relied on, append an entry that says who looked at it.",
        acceptable=False,
    ),
    Rule(
        "withdrawn-why",
        "A withdrawal whose reason is a single word or a dash.",
        'because: "-"',
        "Write a sentence. Whoever proposes the part again wants to know.",
        acceptable=False,
    ),
    Rule(
        "approved-though-withdrawn",
        "An alternate stands approved or restricted at a position, and its part is withdrawn. Only the entries that hold count: "
        "what was settled by later entries stays as it is.",
        "NV2-3540 withdrawn on 2026-06-08, and still an approved alternate at charger-dc/RT1.",
        "Append an entry to the alternate's standing that withdraws it, or to the part's standing that approves it again.",
        acceptable=False,
    ),
    Rule(
        "not-for-here",
        "A part is fitted, or an approved alternate, at a position that is not in its only_for: neither the position nor its board. "
        "Upper and lower case are alike. An alternate's own only_for must name its position too, or be left out.",
        "only_for: [charger-power/RT1] in the part's standing, and the part fitted at coolbox-main/RT1.",
        "Fit or approve another part, or append an entry to the part's standing that names the position.",
        acceptable=False,
    ),
    Rule(
        "only-for-unknown",
        "only_for of an entry that holds names neither a position nor a board of the catalog. Not looked at while records "
        "cannot be read, since the position may be in one of them.",
        "only_for: [charger-pwoer/RT1]",
        "Correct the name.",
        acceptable=False,
    ),
    Rule(
        "withdrawn-fitted",
        "The part that is fitted at a position is withdrawn.",
        "fitted: NV2-3540 after NV2-3540 was withdrawn.",
        "Fit another part. Boards in the field keep the old one; the position says what is built from now on.",
        acceptable=False,
    ),
    Rule(
        "alternate-repeated",
        "An alternate that is the fitted part, or one that stands twice.",
        "alternates with NV10-3435 twice, the second by its own number.",
        "Keep one, and all entries of both in the order of their days.",
        acceptable=False,
    ),
    Rule(
        "own-number-shared",
        "One own number in the records of two parts, or an own number that is another part's number: nobody can tell by it "
        "which of them was bought.",
        "own_number: HS-10473 in two records.",
        "Give each part its own. Where one number buys either of them on purpose, accept the finding in both records.",
    ),
    Rule(
        "hash-missing",
        "A document's file beside the record has no SHA-256 in the record, so nobody would notice another file in its place.",
        "{title: data sheet, revision: C, file: TB3A-103F38-C.pdf}",
        "Add the sha256 that the message gives, once the file is known to be that revision.",
        acceptable=False,
    ),
    Rule(
        "file-hash-differs",
        "A document's file beside the record has another SHA-256 than the record states: the document was replaced.",
        "sha256 of revision C beside a file that is revision D.",
        "Compare the figures with the new revision, then append it to documents.",
        acceptable=False,
    ),
    Rule(
        "position-outside-part",
        "The range of a position reaches outside the operating range that the fitted part's record states.",
        "range_c: [-40, 70] at a position whose fitted part operates from −20 to 85 °C.",
        "Fit a part that is made for the range, or narrow the range to what matters there.",
        acceptable=False,
    ),
    Rule(
        "trip-outside-range",
        "A trip at a temperature outside the range of its position: the error limit says nothing about it.",
        "A trip at 85 °C in a position whose range_c is [-30, 60].",
        "Widen the range so that it holds the trip, or correct the trip's temperature.",
        acceptable=False,
    ),
    Rule(
        "duplicate-part",
        "Two records of one maker with one part number; upper and lower case are alike.",
        "parts/tarnbrook/TB3A-103F38.yaml and parts/old/TB3A-103F38.yaml",
        "Keep one of the two.",
        acceptable=False,
    ),
    Rule(
        "unknown-part",
        "A position names a part that no record has.",
        "fitted: TB3A-103F83",
        "Correct the number, or add the part.",
        acceptable=False,
    ),
    Rule(
        "ledger-edited",
        "An entry of a ledger, of a part or of an alternate at a position, that is not what it was in an earlier revision, or "
        "entries that stand in another order. Only beadroll check --since REVISION looks for it.",
        "The entry of 2026-02-10 says approved, where it said restricted two commits ago.",
        "Restore the entry as it was, and append one that says what holds now.",
        acceptable=False,
    ),
    Rule(
        "ledger-removed",
        "An entry of a ledger that stood in an earlier revision and is gone, or a whole ledger with an approval in it, its part "
        "or alternate with it. An entry that came and went between two revisions is found too. Only beadroll check --since "
        "REVISION looks for it.",
        "An alternate was approved last week; today its ledger ends before that entry.",
        "Put the entry back, and append one that says what holds now, such as withdrawn with the reason.",
        acceptable=False,
    ),
    Rule(
        "curve-moved-unsigned",
        "An approved or restricted part whose curve or tolerance band is more than 1 mK from what it was when the last entry of "
        "its ledger was made. Only beadroll check --since REVISION looks for it.",
        "The B-value is edited from 3435 to 3380 K in a part that was approved with 3435 K.",
        "Append an entry that approves the part as it is now, naming the revision of the document, or restore the figures.",
        acceptable=False,
    ),
    Rule(
        "to-be-filled-in",
        "A field still has the text that beadroll intake puts where it cannot know.",
        "maker: FILL-IN",
        "Fill it in from the data sheet.",
        acceptable=False,
    ),
    Rule(
        "accepted-nothing",
        "The record accepts a finding that is not there (any more).",
        "accepted: [{rule: row-out-of-line, row: 35, because: …}] in a record whose row at 35 °C is fine.",
        "Remove the entry, so that it does not silence a finding of tomorrow.",
        acceptable=False,
    ),
)
RULE_NAMES = tuple(rule.name for rule in RULES)
ACCEPTABLE = tuple(rule.name for rule in RULES if rule.acceptable)
