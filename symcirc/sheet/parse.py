"""From text to statements."""

from __future__ import annotations

from lark.exceptions import UnexpectedInput, VisitError

from symcirc.complaints import Source
from symcirc.grammar import parser
from symcirc.sheet import statements as st
from symcirc.sheet.bounds import check_bounds
from symcirc.sheet.reader import SheetReader
from symcirc.sheet.syntax import explain


def parse_sheet(source: Source) -> tuple[st.Statement, ...]:
    """Return the statements of a sheet.

    Raises Complaint at the first place that is not the sheet's language, or beyond its bounds on size and
    depth.

    >>> statement, = parse_sheet(Source("a.stage", "choose C1, k"))
    >>> [name.text for name in statement.names]
    ['C1', 'k']
    """
    check_bounds(source)
    try:
        tree = parser("sheet").parse(source.text + "\n")
    except UnexpectedInput as error:
        raise explain(error, source) from None
    try:
        result: tuple[st.Statement, ...] = SheetReader(source).transform(tree)
    except VisitError as error:  # lark wraps what a reader's method raises
        raise error.orig_exc from None
    return result
