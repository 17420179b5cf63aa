"""The journal as people and spreadsheets leave it: read with its faults named, added to without loss."""

from __future__ import annotations

import datetime as dt
import threading
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from crossplan.errors import InputError, OutputError
from crossplan.logbook import journal as journal_room
from crossplan.logbook.entry import Entry, Event
from crossplan.logbook.journal import add_entry, read_journal

DAY = dt.date(2027, 3, 4)
HEADER = "date,step,event,count,person,note\n"
ONE = Entry(DAY, "S01", Event.FLIES)


@pytest.fixture
def path(tmp_path: Path) -> Path:
    return tmp_path / "journal.csv"


def faults(path: Path) -> list[tuple[int, str, str]]:
    return [(p.line, p.column, p.text) for p in read_journal(path)[1]]


class TestReading:
    @pytest.mark.parametrize("content", [b"", b"\n\n", b"\xef\xbb\xbf", HEADER.encode(), b"\n" + HEADER.encode()])
    def test_a_journal_without_rows_is_empty_and_sound(self, path: Path, content: bytes) -> None:
        path.write_bytes(content)
        assert read_journal(path) == ((), ())

    def test_rows_are_counted_as_the_spreadsheet_shows_them(self, path: Path) -> None:
        path.write_text(HEADER + '2027-03-04,S01,note,,,"three\nlines\nof note"\n\nsoon,S01,flies,,,\n')
        entries, problems = read_journal(path)
        assert [(e.row, e.note) for e in entries] == [(2, "three\nlines\nof note")]
        assert [(p.line, p.column, p.text) for p in problems] == [(4, "date", "soon")]
        assert problems[0].place() == f"{path}, row 4, column date"

    @pytest.mark.parametrize(
        ("row", "column", "text"),
        [
            (",S01,flies,,,", "date", ""),
            ("2027-02-29,S01,flies,,,", "date", "2027-02-29"),
            ("4.3.2027,S01,flies,,,", "date", "4.3.2027"),
            ("2027-03-04,,flies,,,", "step", ""),
            ("2027-03-04,S01,hatched,,,", "event", "hatched"),
            ("2027-03-04,S01,collected,²,,", "count", "²"),
            ("2027-03-04,S01,collected,-3,,", "count", "-3"),
            ("2027-03-04,S01,collected,2.5,,", "count", "2.5"),
            (f"2027-03-04,S01,collected,{'9' * 5000},,", "count", "9" * 5000),
            ("2027-03-04,S01,collected,,,", "count", ""),
            ("2027-03-04,S01,note,,,dry, old food", "", " old food"),
        ],
    )
    def test_a_cell_that_is_wrong_is_named_with_its_very_characters(
        self, path: Path, row: str, column: str, text: str
    ) -> None:
        path.write_text(HEADER + row + "\n2027-03-04,S01,flies,,,\n", encoding="utf-8")
        entries, problems = read_journal(path)
        assert entries == (ONE,)
        assert [(p.line, p.column, p.text) for p in problems] == [(2, column, text)]
        assert problems[0].hint

    def test_a_quote_that_never_closes_does_not_swallow_rows_in_silence(self, path: Path) -> None:
        path.write_text(HEADER + '2027-03-04,S01,flies,,,\n2027-03-05,S02,note,,,"open\n2027-03-06,S03,flies,,,\n')
        entries, problems = read_journal(path)
        assert entries == (ONE,)
        assert [p.line for p in problems] == [3]
        assert "quotes" in problems[0].message

    @pytest.mark.parametrize("delimiter", [",", ";", "\t"])
    @pytest.mark.parametrize("encoding", ["utf-8", "utf-8-sig"])
    @pytest.mark.parametrize("end", ["\n", "\r\n", "\r"])
    def test_what_spreadsheets_write_is_read(self, path: Path, delimiter: str, encoding: str, end: str) -> None:
        rows = (
            ("Date", " STEP", "event", "note", "person"),
            ("2027-03-04", " S01 ", "Set-up", "a note, and; more", "Jörg"),
        )
        text = end.join(delimiter.join(f'"{c}"' for c in row) for row in rows) + end
        path.write_bytes(text.encode(encoding))
        expected = Entry(DAY, "S01", Event.SET_UP, person="Jörg", note="a note, and; more")
        assert read_journal(path) == ((expected,), ())

    @pytest.mark.parametrize(("encoding", "name"), [("cp1252", "Windows-1252"), ("utf-16", "UTF-16")])
    def test_another_encoding_is_read_and_said(self, path: Path, encoding: str, name: str) -> None:
        path.write_bytes((HEADER + "2027-03-04,S01,flies,,Jörg,\n").encode(encoding))
        entries, problems = read_journal(path)
        assert entries == (Entry(DAY, "S01", Event.FLIES, person="Jörg"),)
        assert len(problems) == 1
        assert name in problems[0].message

    def test_missing_columns_are_named_once(self, path: Path) -> None:
        path.write_text("day,step,what\n2027-03-04,S01,flies\n2027-03-05,S01,note\n")
        entries, problems = read_journal(path)
        assert entries == ()
        assert [(p.line, p.text) for p in problems] == [(1, "day,step,what")]
        assert "no column date and no column event" in problems[0].message

    def test_a_folder_in_its_place_is_said(self, path: Path) -> None:
        path.mkdir()
        with pytest.raises(InputError, match="is a folder"):
            read_journal(path)
        with pytest.raises(InputError, match="is a folder"):
            add_entry(path, ONE)

    @given(st.binary(max_size=200))
    def test_no_bytes_stop_it(self, tmp_path_factory: pytest.TempPathFactory, content: bytes) -> None:
        path = tmp_path_factory.mktemp("bytes") / "journal.csv"
        path.write_bytes(content)
        entries, problems = read_journal(path)
        assert entries or problems or not content.strip(b'\xef\xbb\xbf \t\r\n,;"\x0b\x0c\x1c\x1d\x1e\x1f\x85\xa0\xc2')

    @given(st.text(alphabet='2027-03S1,;"\n\r flies²collectd', max_size=80))
    def test_no_text_under_a_header_stops_it(self, tmp_path_factory: pytest.TempPathFactory, text: str) -> None:
        path = tmp_path_factory.mktemp("text") / "journal.csv"
        path.write_bytes((HEADER + text).encode())
        entries, problems = read_journal(path)
        rows = [e.row for e in entries] + [p.line for p in problems]
        assert len(rows) == len(set(rows))
        assert all(row >= 2 for row in rows)
        assert bool(rows) == bool(text.replace('""', "").strip(", \n\r"))


def notes() -> st.SearchStrategy[str]:
    letters = st.characters(exclude_categories=["Cs"], exclude_characters="\r")
    return st.text(letters, max_size=20).map(str.strip)


class TestAdding:
    @given(
        st.lists(
            st.builds(
                Entry,
                date=st.dates(),
                step=notes().filter(bool),
                event=st.sampled_from(Event),
                count=st.integers(0, 999_999),
                person=notes(),
                note=notes(),
            ),
            min_size=1,
            max_size=4,
        )
    )
    def test_what_is_added_is_read_back(self, tmp_path_factory: pytest.TempPathFactory, added: list[Entry]) -> None:
        path = tmp_path_factory.mktemp("journal") / "journal.csv"
        for entry in added:
            add_entry(path, entry)
        assert read_journal(path) == (tuple(added), ())
        assert [p.name for p in path.parent.iterdir()] == ["journal.csv"]

    def test_the_file_is_plain_rows(self, path: Path) -> None:
        add_entry(path, Entry(DAY, "S01", Event.COLLECTED, 12, "Ida", "dry, old"))
        assert path.read_bytes() == HEADER.encode() + b'2027-03-04,S01,collected,12,Ida,"dry, old"\n'

    def test_columns_that_people_added_stay(self, path: Path) -> None:
        path.write_bytes("\ufeffweather;event;Date;step\nrain, at last;flies;2027-03-03;S02\n\n".encode())
        add_entry(path, Entry(DAY, "S01", Event.COLLECTED, 12, person="Ida"))
        assert path.read_text(encoding="utf-8").splitlines() == [
            "\ufeffweather;event;Date;step;count;person;note",
            "rain, at last;flies;2027-03-03;S02",
            "",
            ";collected;2027-03-04;S01;12;Ida;",
        ]
        entries, problems = read_journal(path)
        assert [(e.step, e.count) for e in entries] == [("S02", None), ("S01", 12)]
        assert problems == ()

    @pytest.mark.parametrize(
        "content",
        [HEADER + "soon,S01,flies,,,\n", HEADER + '2027-03-04,S01,note,,,"open\n', "day,what\n"],
    )
    def test_a_journal_with_faults_is_left_as_it_is(self, path: Path, content: str) -> None:
        path.write_text(content)
        with pytest.raises(OutputError, match="nothing was added") as caught:
            add_entry(path, ONE)
        assert "row" in caught.value.hint
        assert path.read_text() == content
        assert [p.name for p in path.parent.iterdir()] == ["journal.csv"]

    def test_a_journal_in_another_encoding_is_left_as_it_is(self, path: Path) -> None:
        content = (HEADER + "2027-03-04,S01,flies,,Jörg,\n").encode("cp1252")
        path.write_bytes(content)
        with pytest.raises(OutputError, match="nothing was added"):
            add_entry(path, ONE)
        assert path.read_bytes() == content

    @pytest.mark.parametrize(
        ("entry", "column"),
        [
            (Entry(DAY, "S01", Event.COLLECTED), "count"),
            (Entry(DAY, "S01", Event.COLLECTED, -1), "count"),
            (Entry(DAY, "  ", Event.FLIES), "step"),
        ],
    )
    def test_what_could_not_be_read_back_is_not_written(self, path: Path, entry: Entry, column: str) -> None:
        with pytest.raises(InputError, match=column):
            add_entry(path, entry)
        assert not path.exists()

    def test_a_folder_that_is_not_there(self, tmp_path: Path) -> None:
        with pytest.raises(OutputError, match="cannot write"):
            add_entry(tmp_path / "none" / "journal.csv", ONE)

    def test_rights_and_links_stay(self, path: Path, tmp_path: Path) -> None:
        shared = tmp_path / "shared"
        shared.mkdir()
        (shared / "all.csv").write_text(HEADER)
        (shared / "all.csv").chmod(0o664)
        path.symlink_to(shared / "all.csv")
        add_entry(path, ONE)
        assert path.is_symlink()
        assert (shared / "all.csv").stat().st_mode & 0o777 == 0o664
        assert read_journal(shared / "all.csv") == ((ONE,), ())

    def test_entries_written_at_once_all_stay(self, path: Path) -> None:
        added = [Entry(DAY, f"S{i:02d}", Event.FLIES) for i in range(8)]
        writers = [threading.Thread(target=add_entry, args=(path, entry)) for entry in added]
        for writer in writers:
            writer.start()
        for writer in writers:
            writer.join()
        entries, problems = read_journal(path)
        assert sorted(e.step for e in entries) == [e.step for e in added]
        assert problems == ()

    def test_a_lock_left_behind_is_named(self, path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
        monkeypatch.setattr(journal_room, "TRIES", 2)
        lock = path.with_name(".journal.csv.lock")
        lock.touch()
        with pytest.raises(OutputError, match="somebody else") as caught:
            add_entry(path, ONE)
        assert str(lock) in caught.value.hint
        assert lock.exists()
        assert not path.exists()
