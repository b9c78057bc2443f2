"""A CSV file of candidates becomes a roster, or faults with their places."""

import pytest
from hypothesis import example, given
from hypothesis import strategies as st

from authoring.faults import FaultsFound
from authoring.specs.roster import Candidate, parse_roster, read_roster


def faults_of(text):
    with pytest.raises(FaultsFound) as found:
        parse_roster(text, "r.csv")
    return [(f.code, f.source.line, f.source.column) for f in found.value.faults]


@pytest.mark.parametrize("mark", [",", ";", "\t"])
@pytest.mark.parametrize("end", ["\n", "\r\n"])
def test_commas_semicolons_and_tabs_read_alike(mark, end):
    text = "\ufeff" + end.join(
        mark.join(row) for row in [("Name", "candidate"), ("Ruta", " s1 "), ("", "s2"), ("", "")]
    )
    assert parse_roster(text, "r").candidates == (Candidate("s1", "Ruta"), Candidate("s2"))


def test_all_columns_quotes_and_missing_cells():
    text = 'candidate,name,needs,seat\ns1,"Orrin, ""Bo""",large print,A1\n\ns2,Zo\u0308e\n'
    first, second = parse_roster(text, "r").candidates
    assert first == Candidate("s1", 'Orrin, "Bo"', "large print", "A1")
    assert second == Candidate("s2", "Zöe")
    assert str(second.source) == "r:4:1"


def test_unknown_columns_are_weaknesses():
    (weakness,) = parse_roster("candidate,seats\ns1,4\n", "r").weaknesses
    assert weakness.severity == "weakness" and "did you mean 'seat'" in weakness.message
    assert weakness.source.column == 11


def test_faults_are_gathered():
    text = "name,candidate\na,s1\nb,S1\nc,\nd," + "x" * 65 + "\ne,s\u200b2\nf,s3,more\n"
    assert faults_of(text) == [
        ("roster-duplicate", 3, 3),
        ("roster-candidate", 4, 3),
        ("roster-candidate", 5, 3),
        ("roster-candidate", 6, 3),
        ("roster-cell", 7, 6),
    ]


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("", ("roster-empty", 1, 1)),
        ("candidate\n\n", ("roster-empty", 1, 1)),
        ("\nname,seat\n", ("roster-columns", 2, 1)),
        ("candidate,candidate\ns1,2\n", ("roster-columns", 1, 11)),
        ('candidate\n"s1\n', ("roster-quotes", 2, 1)),
        ("candidate\ns\x071\n", ("control-character", 2, 2)),
    ],
)
def test_a_roster_that_cannot_be_used(text, expected):
    assert faults_of(text)[0] == expected


def test_a_file_in_another_encoding_says_so(tmp_path):
    file = tmp_path / "r.csv"
    file.write_bytes("candidate\nZoë\n".encode("latin-1"))
    with pytest.raises(FaultsFound) as found:
        read_roster(file)
    assert found.value.faults[0].code == "not-utf8" and found.value.faults[0].source.line == 2


@given(st.one_of(st.text(max_size=60), st.text('candidate,;\t"\n\r sn1é', max_size=60).map("candidate,name\n".__add__)))
@example('candidate\n"')
@example("candidate\n" + "x" * 200_000)
def test_any_text_gives_a_roster_or_faults(text):
    try:
        roster = parse_roster(text, "r")
    except FaultsFound as found:
        assert all(fault.source is not None for fault in found.faults)
    else:
        assert roster.candidates
