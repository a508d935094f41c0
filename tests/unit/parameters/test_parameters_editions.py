"""The merged Dortmund table is what its two editions and the listed choices make."""

from groups.parameters import read_record
from groups.parameters.csv_file import read_rows
from groups.parameters.editions import merged_csv, read_choices, read_edition
from groups.parameters.record import tables_folder


def merged() -> dict[tuple[int, int], dict[str, str]]:
    file = read_record("unifac-dortmund").files["interactions"]
    return {(int(row["i"]), int(row["j"])): dict(row) for row in read_rows(file)}


def test_the_merged_table_is_current() -> None:
    file = read_record("unifac-dortmund").files["interactions"]
    assert (tables_folder() / file.name).read_text(encoding="utf-8") == merged_csv()


def test_a_pair_of_one_edition_only_is_taken_from_it() -> None:
    older, newer = set(read_edition("2006")), set(read_edition("2016"))
    rows = merged()
    assert set(rows) == older | newer
    assert {rows[pair]["edition"] for pair in older - newer} == {"2006"}
    assert {rows[pair]["edition"] for pair in newer - older} == {"2016"}


def test_a_disputed_pair_is_new_but_for_the_listed_choices() -> None:
    editions = {edition: read_edition(edition) for edition in ("2006", "2016")}
    chosen = {(c.i, c.j): c.edition for c in read_choices()}
    rows = merged()
    for i, j in set(editions["2006"]) & set(editions["2016"]):
        edition = chosen.get((min(i, j), max(i, j)), "2016")
        row = rows[i, j]
        assert row["edition"] == edition
        assert (row["a"], row["b"], row["c"]) == editions[edition][i, j]


def test_every_choice_gives_its_reason() -> None:
    assert read_choices()
    for choice in read_choices():
        assert len(choice.reason) > 40
