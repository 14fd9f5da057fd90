"""A note that shows every block of ``symcirc/note/model.py`` and every text that could break a writer.

Nothing in it is the answer to anything: it is there to be written.
"""

from __future__ import annotations

from symcirc.note.model import (
    Block,
    Derivation,
    Document,
    Equation,
    Figure,
    Heading,
    Items,
    Listing,
    Mathematics,
    Paragraph,
    Reference,
    Remark,
    Step,
    Table,
)
from symcirc.transfer.form import (
    ONE,
    ZERO,
    Decimal,
    Divided,
    Form,
    Integer,
    Negative,
    Power,
    Product,
    Root,
    Sum,
    Symbol,
)

#: Texts that mean something in one of the languages a note is written in, each to be read as it stands here.
ODD_TEXTS: dict[str, str] = {
    "backslash": r"a \textbf{b} \input{c} \\ d",
    "percent": "5 % of 100%",
    "script": "<script>alert('x')</script> <b>bold</b> </style> <!-- --> ]]>",
    "hash": '#set page(fill: red) #import "x" # 1',
    "dollar": "$x$ and $$y$$ and 3 $",
    "ampersand": "R & D &amp; &lt; AT&T",
    "quotes": "'single' \"double\" `back` ``two'' « angle »",
    "brackets": "[a] {b} (c) <d> *e* _f_ ~g~ ^h^ @i |j| = k",
    "dashes": "-- --- - // /* comment */ http://example.org/a_b?c=d&e=f#g",
    "long word": "Unterspannungsabschaltungsrelais" * 6,
    "Greek": "Φίλτρο ω0 = 2π·1,2 kHz, Ω, µ, Δ",
    "Chinese": "二階低通濾波器,截止頻率為一千二百赫茲",
    "Arabic": "مرشح تمرير منخفض (من الدرجة 2) R1",
    "Hebrew": "מסנן מעביר נמוכים, C1 = 22 nF",
    "spaces": "  two spaces  before, between  and after  ",
    "marks": "é ñ ü ß “curly” – — … ≤ ≥ ± ° √ × −",
}

R1, R2, R3, C1, C2 = (Symbol(name) for name in ("R1", "R2", "R3", "C1", "C2"))
V_OUT, V_IN, S, OMEGA0 = Symbol("V_out"), Symbol("V_in"), Symbol("s"), Symbol("ω0")

#: Names of every sort of ``latex_name``.
NAMES = (
    "R1", "Rf", "S1_R1", "S1_S2_Rf", "U1_gain", "U1_gbw", "V_out", "V_S1_x", "I_R1", "beta", "r_min", "pi", "s",
    "k", "w0", "ω0", "H", "R1_2_x_", "_x", "Q",
)  # fmt: skip

#: An equation much wider than a phone, and than a page.
WIDE = Sum(
    tuple(
        Negative(Product((Symbol(f"R{n}"), Symbol(f"C{n}"), Power(S, n % 5 + 2)))) if n % 3 == 2 else
        Divided(Product((Symbol(f"R{n}"), Sum((Symbol(f"R{n + 1}"), Symbol(f"R{n + 2}"))))), Symbol(f"R{n + 3}"))
        for n in range(1, 19)
    )
)  # fmt: skip

_CIRCUIT = """<svg xmlns="http://www.w3.org/2000/svg" width="320" height="120" viewBox="0 0 320 120" role="img"
 aria-labelledby="title description" fill="none" stroke="currentColor" stroke-width="1.3">
<title id="title">R1 and C1</title>
<desc id="description">R1 from in to out, C1 from out to ground.</desc>
<path d="M20 40 H90 M170 40 H300 M240 40 V70 M222 70 H258 M222 78 H258 M240 78 V105 M225 105 H255"/>
<path d="M90 30 H170 V50 H90 Z"/>
<circle cx="240" cy="40" r="2.6" fill="currentColor" stroke="none"/>
<text x="130" y="22" font-size="13" text-anchor="middle" fill="currentColor" stroke="none">R1 &lt; 10 kΩ</text>
<text x="266" y="79" font-size="13" fill="currentColor" stroke="none">C1</text>
</svg>
"""

_PLOT = """<svg xmlns="http://www.w3.org/2000/svg" width="720" height="300" viewBox="0 0 720 300" role="img"
 aria-labelledby="title description">
<title id="title">Gain</title>
<desc id="description">Level, then falling.</desc>
<defs><clipPath id="inside"><rect x="60" y="20" width="640" height="240"/></clipPath></defs>
<g fill="none" stroke="currentColor"><rect x="60" y="20" width="640" height="240"/>
<path clip-path="url(#inside)" d="M60 60 H300 C400 60 420 90 700 250" stroke-width="2"/></g>
<text x="380" y="290" font-size="13" text-anchor="middle" fill="currentColor">frequency, Hz</text>
<text x="52" y="64" font-size="13" text-anchor="end" fill="currentColor">0 dB</text>
</svg>
"""


def _equation(number: int, left: Form, right: Form) -> Equation:
    return Equation(f"eq-{number}", number, left, "=", right)


_TRANSFER = _equation(
    1,
    Divided(V_OUT, V_IN),
    Negative(
        Divided(
            Divided(ONE, Product((R1, R3, C1, C2))),
            Sum(
                (
                    Power(S, 2),
                    Divided(Product((S, Sum((Divided(ONE, R1), Divided(ONE, R2), Divided(ONE, R3))))), C1),
                    Divided(ONE, Product((R2, R3, C1, C2))),
                )
            ),
        )
    ),
)
_WIDE = _equation(2, Power(Sum((OMEGA0, Negative(R1))), 2), WIDE)
_ROOT = Equation(
    "eq-3", 3, Sum((Product((Integer(12), Power(R2, 3))), Negative(Power(R1, 3)))), "=", ZERO, root_of="R2"
)
_LIMIT = Equation(
    "eq-4",
    4,
    C1,
    ">=",
    Sum(
        (
            Product((Integer(4), Integer(25), C2, Power(Symbol("Q"), 2))),
            Product((Decimal("7.25e-12"), S)),
            Decimal("0.5"),
        )
    ),
)
_RADICAL = Equation(
    "eq-5",
    5,
    OMEGA0,
    "<",
    Divided(
        Product((Integer(2), Symbol("pi"), Root(Sum((Power(Root(R1), 2), Negative(Negative(R2))))))),
        Power(Divided(R1, Power(Product((R2, R3)), 2)), 3),
    ),
)
_NAMES = Equation("eq-6", 6, Symbol("H"), "<=", Product(tuple(Symbol(name) for name in NAMES)))
#: A number in decimals, and the name that the sheet's language does not have: ω with the index 0.
_DECIMAL = Equation(
    "eq-10", 10, Symbol("ω0"), "=", Divided(Decimal("7.25e-12"), Product((Decimal("0.5"), C1)))
)
_STEPS = (
    Step(
        ("The currents that leave node ", Mathematics(Symbol("m")), " add up to zero."),
        _equation(7, Sum((Divided(Sum((V_IN, Negative(V_OUT))), R1), Negative(Symbol("I_R2")))), ZERO),
    ),
    Step(
        ("This in ", Reference("eq-7"), "; <b>& so on</b>, 5 % of $x$, \\alpha, #1."),
        _equation(8, V_OUT, Negative(Product((Divided(R2, R1), V_IN)))),
    ),
    Step(("And the wide one.",), Equation("eq-9", 9, WIDE, ">", ZERO)),
)

_BLOCKS: tuple[Block, ...] = (
    Heading(1, "Summary"),
    Items(
        (
            ("What: a low-pass of order 2 with ", Mathematics(OMEGA0), "."),
            ("How well: see ", Reference("eq-1"), ", ", Reference("tab-1"), " and ", Reference("fig-2"), "."),
            ("What to watch: ", ODD_TEXTS["script"]),
        )
    ),
    Heading(1, r"Texts: \ % <script> # $ & 'quotes' \"double\" Ω 電 مرشح"),
    *(Paragraph((f"{name}: ", text)) for name, text in ODD_TEXTS.items()),
    Heading(1, "Circuit"),
    Figure(
        "fig-1",
        1,
        "circuit",
        'The circuit of <b>"hive"</b> & co, 5 % #1 $2 \\3.',
        'Drive at the left: R1 from in to out, C1 from out to ground; "quoted" <b> & more.',
        _CIRCUIT,
    ),
    Heading(1, "Transfer function"),
    Paragraph(
        (
            "With ",
            Mathematics(Product((Symbol("ω0"), Divided(ONE, Root(Product((R1, R2, C1, C2))))))),
            " inside a sentence, and ",
            Mathematics(Divided(ONE, R1)),
            "; ",
            Reference("eq-2"),
            " is wide.",
        )
    ),
    _TRANSFER,
    _WIDE,
    Heading(2, "A part of a section"),
    _ROOT,
    _LIMIT,
    _RADICAL,
    _NAMES,
    _DECIMAL,
    Heading(1, "Derivation"),
    Derivation(_STEPS),
    Heading(1, "Values"),
    Table(
        "tab-1",
        1,
        "Chosen values, exact & preferred, 100 % <i>",
        (("Part",), ("Exact",), ("Preferred",), ("Remark",)),
        (
            ((Mathematics(R1),), ("9.947 kΩ",), ("10 kΩ",), ("E24",)),
            ((Mathematics(Symbol("S1_Rf")),), ("-1.00 µF",), ("1 µF",), (ODD_TEXTS["script"],)),
            ((Mathematics(C1),), ("22.0 nF",), ("22 nF",), (ODD_TEXTS["dollar"], ", see ", Reference("eq-4"))),
            ((ODD_TEXTS["ampersand"],), ("",), ("1",), (ODD_TEXTS["Chinese"], " ", ODD_TEXTS["long word"])),
        ),
        (False, True, True, False),
    ),
    Table(
        "tab-2",
        2,
        "A wide table",
        tuple((f"Column {n}",) for n in range(1, 13)),
        tuple(tuple((f"{row * n}.5 kHz",) for n in range(1, 13)) for row in range(1, 4)),
        (True,) * 12,
    ),
    Heading(1, "Response"),
    Figure("fig-2", 2, "gain", "Gain against frequency.", "The gain is level to 1 kHz, then falls.", _PLOT),
    Heading(1, "The sheet"),
    Remark("warning", ("Line 3: ", ODD_TEXTS["brackets"], ", ", Mathematics(R1), ", ", Reference("eq-1"))),
    Listing(
        "\n".join(
            [
                'stage "Hive <script>alert(1)</script> & co"  # 5 % \\ $x$',
                "",
                "in -- R1 -- out",
                "   out -- C1 -- gnd",
                "note \"" + " ".join(ODD_TEXTS.values()) + "\"",
                "\tafter a tab   three spaces",
                "```",
                "",
            ]
        )
    ),
    Remark("caution", ("The results describe a linear small-signal model; see ", Reference("fig-1"), ".")),
)  # fmt: skip

#: The note.
SAMPLE = Document(
    title=r'Hive "microphone" & <b>anti-alias</b>, 5 % #1 $x$ \alpha_2 Ω 電 مرشح',
    date="2026-12-01",
    file=r"C:\sheets & <odd>\hive_#1_$x%.stage",
    digest="0123456789abcdef" * 4,
    blocks=_BLOCKS,
)
