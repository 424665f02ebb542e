"""Whatever a file holds, it is read or refused in words; nothing else happens."""

from hypothesis import example, given, settings
from hypothesis import strategies as st

from shop.refusals import Refused
from shop.track.csv_table import decoded, guarded, read_table, written

NAMES = {"car": "car", "60 ft": "time_60", "notes": "crew_saw"}


@settings(deadline=None, max_examples=60)
@given(st.binary(max_size=300))
@example(b"\xff\xfe")
@example(b"\xff\xfec\x00a\x00r\x00\n\x00x\x00")
@example(b"car\n\xe9")
def test_any_bytes(data):
    try:
        text, notes = decoded(data)
        table = read_table(text, NAMES)
    except Refused as refused:
        assert set(refused.faults) == {"file"}
        return
    assert table.rows and all(isinstance(note, str) for note in notes)


@settings(deadline=None, max_examples=60)
@given(st.text(max_size=300).map(lambda text: f"car,60 ft,notes\n{text}"))
@example('car,60 ft,notes\n"')
@example('car,60 ft,notes\na"b,c,d"\n')
@example("car;60 ft;notes\r1;2;3")
def test_any_text_under_a_good_header(text):
    try:
        table = read_table(text, NAMES)
    except Refused:
        return
    for row in table.rows:
        assert row.fault or set(row.cells) == set(NAMES.values())


CELL = st.text(st.characters(blacklist_categories=["Cs"], blacklist_characters="\x00"), max_size=12)


@settings(deadline=None, max_examples=60)
@given(st.lists(st.tuples(CELL, CELL, CELL), min_size=1, max_size=8))
def test_what_is_written_is_read_again(rows):
    rows = [tuple(cell.strip() for cell in row) for row in rows]
    # A lone apostrophe before a formula's sign is the guard itself.
    rows = [row for row in rows if any(row) and not any(cell.startswith("'") for cell in row)]
    if not rows:
        return
    text = written(["car", "60 ft", "notes"], [[guarded(cell) for cell in row] for row in rows])
    table = read_table(text, NAMES)
    assert [tuple(row.cells[column] for column in ("car", "time_60", "crew_saw")) for row in table.rows] == rows


@settings(deadline=None, max_examples=60)
@given(st.sampled_from([",", ";", "\t"]), st.sampled_from(["\n", "\r\n", "\r"]))
def test_separators_and_line_ends(separator, end):
    text = end.join(separator.join(cells) for cells in (("car", "60 ft", "notes"), ("218", "1.312", "clean")))
    row, = read_table(text, NAMES).rows
    assert row.cells == {"car": "218", "time_60": "1.312", "crew_saw": "clean"}
