"""What people write above the columns of a bill, in four languages, and which column is what."""

from __future__ import annotations

import re
from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from typing import Literal, get_args

from builder.bills.spelling import heading_key
from builder.problems import clipped

Role = Literal["reference", "number", "maker", "own-number", "quantity"]
ROLES: tuple[Role, ...] = get_args(Role)


def _pairs(first: str, second: str) -> frozenset[str]:
    """Every word of the first with every word of the second behind it."""
    return frozenset(one + other for one in first.split() for other in second.split())


def words(text: str) -> frozenset[str]:
    """The words of a text."""
    return frozenset(text.split())


_MAKER = "maker makers manufacturer manufacturers mfr mfg mfgr manuf manf producer"
_OWN = "own our internal inhouse house company"
_NUMBER = "number no nr num pn partnumber partno partnr partnum part articlenumber articleno itemnumber itemno"
_PLAIN_NUMBER = words(
    "part partnumber partno partnr partnum partcode pn number ordercode ordernumber orderingcode"
    " teilenummer teilenr bestellnummer bestellnr numerodepiece nodepiece numerodepieza nodepieza"
)
_TYPE = words("typenumber type typ typbezeichnung bauteil piece pieza")
# In French and Spanish the reference may be the part's; a column of its own then says where it stands.
_REFERENCE = words("reference references ref refs referenz referenzen referencia referencias")
_PLACE = words("position positions location locations place places posicion posiciones")

# Of each role the first kind of word that a column has decides: the later ones mean it only where nothing else does.
_HEADINGS: Mapping[Role, tuple[frozenset[str], ...]] = {
    "reference": (
        words(
            "refdes refdesignator refdesignators designator designators referencedesignator referencedesignators"
            " referencedesignation refdesignation partreference partreferences componentreference"
            " referenzbezeichner bauteilreferenz bezeichner kennzeichen einbauplatz bestuckungsplatz"
            " repere reperes reperetopo reperetopologique designador designadores"
        ),
        _REFERENCE,
        _PLACE,
    ),
    "number": (
        _pairs(_MAKER, _NUMBER)
        | words(
            "mpn mpns herstellernummer herstellernr herstellerteilenummer herstellerteilenr herstellerartikelnummer"
            " herstellerartikelnr herstellerbestellnummer herstellertyp herstellerbezeichnung"
            " referencefabricant reffabricant numerofabricant nofabricant codefabricant numerodufabricant"
            " numerodepiecefabricant referencedufabricant"
            " referenciafabricante referenciadelfabricante reffabricante numerofabricante numerodelfabricante"
            " numerodefabricante numerodepiezadelfabricante codigofabricante codigodelfabricante"
        ),
        _PLAIN_NUMBER,
        _TYPE,
        _REFERENCE,
    ),
    "maker": (
        words(
            "maker manufacturer mfr mfg mfgr manuf manf makername producer hersteller fabricant fabricante marque marca"
        )
        | _pairs("manufacturer mfr mfg maker", "name"),
    ),
    "own-number": (
        _pairs(_OWN, f"{_NUMBER} code")
        | words(
            "ipn itemnumber itemno materialnumber materialno stocknumber stockno stockcode articlenumber articleno"
            " internenummer internenr interneteilenummer eigenenummer sachnummer sachnr materialnummer materialnr"
            " artikelnummer artikelnr hausnummer"
            " referenceinterne refinterne numerointerne codeinterne codearticle numerodarticle nodarticle"
            " referenciainterna refinterna numerointerno codigointerno codigodearticulo numerodearticulo"
        ),
        _PLAIN_NUMBER,
        _REFERENCE,
    ),
    "quantity": (
        words(
            "quantity quantities qty qnty quant menge anzahl stuckzahl stuck stk quantite qte nb nbre nombre cantidad cant"
        )
        | _pairs("quantity qty", "perboard perunit perassembly perpcb"),
        words("amount count pieces pcs unidades"),
    ),
}
# What a heading says of a second source's column: "MPN 2", "Alternate MPN", "2nd source P/N".
_SECOND = re.compile(
    r"[0-9]+(?:st|nd|rd|th)?|alternat(?:e|ive|iv|if|ivo|iva)?s?|alt|second(?:ary|source)?|source|substitute|ersatz|zweite?"
)
_ANY_NUMBER = _HEADINGS["number"][0] | _PLAIN_NUMBER | _HEADINGS["own-number"][0]
_SECOND_NUMBER = words(
    "alternate alternates alternative alternatives alternativen secondsource secondsources 2ndsource zweitquelle"
)
_DESCRIPTION = words(
    "description desc descr partdescription value comment comments remark remarks note notes category"
    " beschreibung bezeichnung benennung wert kommentar bemerkung"
    " designation valeur commentaire remarque descripcion denominacion valor comentario"
)
_FITTED = words(
    "fitted fit populate populated mount mounted placed assemble assembled stuffed"
    " bestuckt bestucken bestuckung monte montes equipe montado montar"
)
NOT_FITTED = words(
    "dnp dnf dni dnm dns notfitted notpopulated notmounted unfitted nofit nopop noplace nomount"
    " nichtbestuckt nichtbestucken nonmonte nonequipe nemontepas nopasmonter nomontar nomontado"
) | _pairs("donot", "fit populate place mount install stuff assemble")


@dataclass(frozen=True)
class SecondSource:
    """The columns of a second source: its number's heading and place, and the place of its maker, if it has one."""

    heading: str
    number: int
    maker: int | None


@dataclass(frozen=True)
class Columns:
    """The columns of a bill by what they hold, counted from 0."""

    of: Mapping[Role, int]
    seconds: tuple[SecondSource, ...]
    descriptions: tuple[int, ...]
    fitted: tuple[int, ...]
    not_fitted: tuple[int, ...]
    doubt: str = ""

    @property
    def are_usable(self) -> bool:
        """Whether some column holds a part's number."""
        return "number" in self.of or "own-number" in self.of

    @property
    def count(self) -> int:
        """How many columns were recognised."""
        return len(self.of) + len(self.seconds) + len(self.descriptions) + len(self.fitted) + len(self.not_fitted)


def columns(headings: Sequence[str], chosen: Mapping[Role, str]) -> Columns | None:
    """What a row says as headings; None where it lacks one that was chosen."""
    keys = [heading_key(heading) for heading in headings]
    of: dict[Role, int] = {}
    doubts: list[str] = []
    for role in sorted(ROLES, key=lambda role: role not in chosen):
        kinds = (frozenset([heading_key(chosen[role])]),) if role in chosen else _HEADINGS[role]
        found = next(filter(None, (_places(keys, kind, of.values()) for kind in kinds)), [])
        if role in chosen and not found:
            return None
        if len(found) > 1:
            doubts.append(_doubt(role, [headings[i] for i in found]))
        if found:
            of[role] = found[0]
    others = (_places(keys, kind, of.values()) for kind in (_DESCRIPTION, _FITTED, NOT_FITTED))
    descriptions, fitted, not_fitted = map(tuple, others)
    # Who chooses the column of the numbers has the others left alone.
    seconds = () if "number" in chosen else tuple(_seconds(headings, keys, of.values()))
    return Columns(of, seconds, descriptions, fitted, not_fitted, " ".join(doubts))


def _seconds(headings: Sequence[str], keys: Sequence[str], taken: Iterable[int]) -> Iterator[SecondSource]:
    """The columns that a heading calls a second source's; number and maker belong together by their count."""
    plain = {i: _SECOND.sub("", key) for i, key in enumerate(keys) if i not in taken and _SECOND.search(key)}
    makers = {_counted(keys[i]): i for i, key in plain.items() if key in _HEADINGS["maker"][0]}
    for i, key in plain.items():
        if key in _ANY_NUMBER or keys[i] in _SECOND_NUMBER:
            yield SecondSource(" ".join(headings[i].split()), i, makers.get(_counted(keys[i])))


def _counted(key: str) -> str:
    return "".join(filter(str.isdigit, key))


def _places(keys: Sequence[str], meant: frozenset[str], taken: Iterable[int]) -> list[int]:
    # The first of several makers: "Manufacturer part number 1".
    return [i for i, key in enumerate(keys) if {key, key.replace("1", "")} & meant and i not in taken]


def _doubt(role: Role, headings: Sequence[str]) -> str:
    shown = " and ".join(clipped(" ".join(heading.split())) for heading in headings)
    return f"the headings {shown} both say {role.replace('-', ' ')}. Choose one with --{role}, or rename one."
