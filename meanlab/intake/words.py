"""Words that stand where a number should: what people and instruments write for no value, too low, too high.

A word is looked up without case, blanks, points, hyphens, slashes and brackets: "N.D.", "n/d" and "(nd)" are one.
"""

import re


def word_set(words: str) -> frozenset[str]:
    """Return words parted by blanks as a set."""
    return frozenset(words.split())


_DROPPED = re.compile(r"[\s\xa0._\-–—/'\"()\[\]:;]+")
_NO_LETTERS = re.compile(r"[-–—―]{1,12}|\.{1,3}|…|\?{1,3}|/{1,3}|∅")

MISSING = word_set(
    "na <na> nan null none missing void empty blankcell ka kA nb nm nr tbd fehlt fehlend entfällt leer notmeasured "
    "notdetermined notanalysed notanalyzed nottested notavailable notapplicable notreported notrecorded nodata "
    "novalue noresult noreading nosample nichtgemessen nichtbestimmt nichtanalysiert nichtauswertbar "
    "nichtverfügbar keineangabe keinwert keinmesswert nonmesuré nondéterminé sindato missingvalue samplelost "
    "nomeasurement"
)
ERROR_CELLS = word_set(
    "#na #nv #nd #null! #div0! #value! #ref! #name? #num! #wert! #zahl! #bezug! #spill! #calc! #field! "
    "#gettingdata #valor! #valeur! #nombre! #error! #überlauf!"
)
BELOW = word_set(
    "nd nn bdl bld bql blq bloq blod bmdl bmql udl lod loq mdl mql <lod <loq <mdl <mql <dl <ql <rl <mrl <pql "
    "<lloq <ldl <bg <ng <nwg <ld <lq ubg ung trace traces tr spur spuren under underrange underflow undrange lo "
    "low udr undetected notdetected notdetectable nonedetected nichtnachweisbar nichtnachgewiesen belowrange "
    "belowlimit belowlod belowloq belowmdl belowdetection belowdetectionlimit belowthedetectionlimit "
    "belowlimitofdetection belowthelimit belowlimitofquantification belowquantificationlimit "
    "belowquantitationlimit belowreportinglimit unterbg unterng unternwg unterbestimmungsgrenze "
    "unternachweisgrenze <nachweisgrenze <bestimmungsgrenze nondétecté nodetectado <limit <min <range toolow"
)
LIMIT_NAMES = word_set("lod loq mdl mql lo low")
ABOVE = word_set(
    "over overrange overflow overload overld ovld ovl ovr ovrng ovfl ovrflw overscale ol 0l +ol hi high sat satd "
    "saturated saturation tntc tmtc clip clipped offscale outofrange aboverange abovelimit aboveuloq "
    "abovecalibration abovecalibrationrange >max >range >uloq >limit >cal >calmax >uql auloq aql übersteuert "
    "überlauf confluent exceeds exceeded toonumeroustocount toomanytocount detectorsaturated "
    "messbereichüberschritten bereichüberschritten toohigh + ++ +++ ++++ +++++"
)
UNCLEAR = frozenset({"nd", "lo", "low", "hi", "high", "tr", "nn"})
INFINITE = word_set("inf +inf infinity +infinity ∞ +∞ 1#inf 1#qnan 1#ind")
SUMMARY = word_set(
    "mean avg average median mittelwert mw mittel durchschnitt moyenne media promedio x̄ x̅ xbar sd std stdev "
    "stddev stabw stabwn stdabw standardabweichung standarddeviation rsd rsd% %rsd cv cv% %cv vk vk% "
    "variationskoeffizient n min max minimum maximum sum summe total count anzahl range spannweite variance "
    "varianz var sem u ci unsicherheit uncertainty écarttype ecarttype geomean s σ sr relstddev relstdev "
    "relativestandarddeviation relstandardabweichung standarderror confidenceinterval 95%ci numberofreadings "
    "meanvalue averagevalue grandmean overallmean geometricmean grandtotal stderr se samplesize meansd mean±sd "
    "subtotal arithmeticmean meanofreadings coefficientofvariation meanvalues"
)
FLAGS = word_set(
    "a b c d e f g h j r u x * ** *** # ! ? † ‡ § ^ outlier outlier? rejected reject suspect invalid bad ok good "
    "check remark see note repeat repeated rerun diluted dil manual edited estimated est j+ uj high low"
)


def plain_word(text: str) -> str:
    """Return a word as it is looked up.

    >>> plain_word("N.D."), plain_word("(over range)"), plain_word("#DIV/0!")
    ('nd', 'overrange', '#div0!')
    """
    return _DROPPED.sub("", text.casefold())


def is_missing_mark(text: str) -> bool:
    """Tell whether a text stands for no value: "-", "NA", "not measured", but not an error of a spreadsheet."""
    return bool(_NO_LETTERS.fullmatch(text)) or plain_word(text) in MISSING


_FILLERS = frozenset({"the", "was", "is", "were", "are", "our"})


def is_summary(label: str) -> bool:
    """Tell whether a label names a figure computed from readings: "Mean", "SD", "n", "Mittelwert:".

    >>> is_summary("Std. dev. ="), is_summary("RSD (%)"), is_summary("Nitrate")
    (True, True, False)
    """
    word = plain_word(" ".join(word for word in label.split() if word.casefold() not in _FILLERS)).rstrip("=")
    return word in SUMMARY
