"""Genotypes to flies: what an element is told to be, where it sits, who carries it, and what is said of the text."""

from __future__ import annotations

import pytest

from crossplan.errors import GenotypeError, Severity
from crossplan.genetics.element import Element, Kind
from crossplan.genetics.fly import Fly
from crossplan.genetics.notation import Reading, fly_json, format_genotype, read_fly, read_genotype, reading_json


def element(text: str, symbol: str) -> Element:
    """Return the element of that symbol in a genotype."""
    reading = read_genotype(text)
    assert reading.ok, reading.problems
    return next(e for e in reading.elements if e.symbol == symbol)


def codes(reading: Reading, severity: str = "") -> set[str]:
    return {p.code for p in reading.problems if not severity or p.severity == severity}


def female(text: str) -> Fly:
    return read_fly(text, "female")


class TestInsertions:
    def test_standard_and_shorthand_are_one_element(self) -> None:
        standard = element("P{y[+t7.7] w[+mC]=AD-K12}attP40", "AD-K12@attP40")
        for text in ("AD-K12@attP40", "AD-K12(attP40)", "AD-K12 (attP40)", "AD-K12 in attP40", "AD-K12 attP40"):
            short = element(text, "AD-K12@attP40")
            assert short == standard
            assert (short.kind, short.site, short.chromosome) == (Kind.INSERTION, "attP40", "2")
            assert short.position_cM == standard.position_cM
            assert short.component == standard.component == "AD"

    def test_written_markers_count(self) -> None:
        hairpin = element("y[1] v[1]; P{y[+t7.7] v[+t1.8]=k.IR}attP2", "k.IR@attP2")
        assert hairpin.traits.restores == {"y", "v"}

    def test_unusual_markers_are_not_lost_in_the_short_form(self) -> None:
        fly = female("y[1] v[1]; P{y[+t7.7] v[+t1.8]=k.IR}attP2")
        assert format_genotype(fly) == "y[1] v[1]; +; P{y[+t7.7] v[+t1.8]=k.IR}attP2"
        assert fly_json(fly)["3"] == [["k.IR@attP2"], ["k.IR@attP2"]]
        assert female(format_genotype(fly)) == fly

    def test_the_markers_of_the_site_stay_beside_the_insertion(self) -> None:
        assert element("P{w[+mC]=UAS-k}VK00018", "UAS-k@VK00018").traits.restores == {"w", "y"}

    def test_a_gene_that_was_hit_gives_the_place(self) -> None:
        hit = element("P{lacW}e[k1]", "lacW@e[k1]")
        assert (hit.chromosome, hit.position_cM) == ("3", 70.7)

    def test_two_insertions_of_one_site_stand_on_two_homologues(self) -> None:
        fly = female("w; AD-K1@attP40/UAS-k@attP40; +")
        assert [h.symbols for h in fly.pair("2")] == [("AD-K1@attP40",), ("UAS-k@attP40",)]
        assert "same-site" in codes(read_genotype("w; AD-K1@attP40, UAS-k@attP40; +"), "error")

    def test_one_insertion_in_two_genes(self) -> None:
        reading = read_genotype("w; +; Mi{ET1}e[KX1] kxg[KX1]")
        assert [e.symbol for e in reading.elements] == ["w", "ET1@e[KX1]"]
        assert "two-genes" in codes(reading)

    def test_insertions_run_together_are_not_one(self) -> None:
        assert codes(read_genotype("w; P{a}1P{b}2/CyO"), "error") == {"run-together"}

    def test_frt_says_its_arm(self) -> None:
        assert element("w; FRT40A", "FRT40A").chromosome == "2"
        assert element("w; neoFRT82B", "neoFRT82B").chromosome == "3"
        assert element("FRT19A", "FRT19A").chromosome == "X"


class TestAlleles:
    @pytest.mark.parametrize(
        ("text", "symbol"), [("Sb1", "Sb[1]"), ("Sb", "Sb"), ("Sb(1)", "Sb[1]"), ("Sb[1]", "Sb[1]")]
    )
    def test_spellings_of_an_allele(self, text: str, symbol: str) -> None:
        sb = element(f"w; +; {text}/TM6B, Tb", symbol)
        assert (sb.kind, sb.gene) == (Kind.ALLELE, "Sb")
        assert "stubble bristles" in sb.traits.dominant

    def test_a_line_code_is_no_allele(self) -> None:
        assert element("w; R76F05; +", "R76F05").kind is Kind.UNKNOWN

    def test_a_null_of_white_is_white(self) -> None:
        assert element("w-", "w[-]").traits.null_for == {"w"}
        assert element("yw", "w").traits.null_for == {"w"}

    @pytest.mark.parametrize(("text", "symbol", "group", "chromosome"), [
        ("l(2)k5[1]/CyO", "l(2)k5[1]", "l(2)k5", "2"), ("l(3)k5[1]/TM3, Sb", "l(3)k5[1]", "l(3)k5", "3"),
        ("l(1)k5/FM7a", "l(1)k5", "l(1)k5", "X"), ("Df(2R)k6/CyO", "Df(2R)k6", "Df(2R)k6", "2"),
    ])  # fmt: skip
    def test_lethals_by_name(self, text: str, symbol: str, group: str, chromosome: str) -> None:
        found = element(text, symbol)
        assert found.traits.lethal == {group}
        assert found.chromosome == chromosome

    def test_a_deficiency_is_taken_to_be_lethal_and_that_is_said(self) -> None:
        assert "assumed-lethal" in codes(read_genotype("Df(2R)k6/CyO"))

    def test_an_unknown_symbol_keeps_itself_and_that_is_said(self) -> None:
        reading = read_genotype("w; kxg[7]/CyO")
        assert "unknown-symbol" in codes(reading, "note")
        assert next(e for e in reading.elements if e.symbol == "kxg[7]").gene == "kxg"

    def test_a_duplication_sits_where_it_was_put(self) -> None:
        assert female("w; +; Dp(1;3)k1/+").pair("3")[0].symbols == ("Dp(1;3)k1",)


class TestBalancers:
    def test_marker_written(self) -> None:
        fly = female("w; +; +/TM3, Sb[1]")
        assert fly.pair("3")[1].symbols == ("TM3", "Sb[1]")
        assert not read_genotype("w; +; +/TM3, Sb[1]").assumed

    def test_marker_assumed(self) -> None:
        reading = read_genotype("w; +; +/TM3")
        assert "assumed-marker" in codes(reading, "warning")
        assert reading.female is not None
        assert "stubble bristles" in reading.female.pair("3")[1].elements[0].traits.dominant

    def test_a_lost_marker_can_be_denied(self) -> None:
        balancer = female("w; +; +/TM6B, Tb[+]").pair("3")[1].elements[0]
        assert "tubby pupae" not in balancer.traits.dominant

    def test_the_glow_of_a_balancer(self) -> None:
        glow = element("w; +/CyO, Kr-GFP", "Kr-GFP")
        assert glow.traits.dominant == ("green fluorescence",)
        assert glow.traits.restores == {"w"}
        assert element("w; +/CyO-KrGFP", "CyO-KrGFP").kind is Kind.BALANCER

    def test_capitals_are_put_right_with_a_note(self) -> None:
        reading = read_genotype("w; Sp/cyo")
        assert reading.canonical == "w; Sp/CyO; +"
        assert "spelling" in codes(reading, "note")

    @pytest.mark.parametrize(("typed", "meant"), [("TM6Bb", "TM6B"), ("Cy0", "CyO"), ("CyyO", "CyO"), ("MRKS", "MKRS")])
    def test_a_typing_error_is_not_taken_for_an_element(self, typed: str, meant: str) -> None:
        reading = read_genotype(f"w; +/{typed}; +")
        assert codes(reading, "error") == {"balancer-typo"}
        assert meant in reading.problems[0].hint

    def test_a_driver_named_after_a_cell_is_no_balancer(self) -> None:
        fly = female("w; +; Tm3KX-Gal4/TM3, Sb")
        assert [h.symbols[0] for h in fly.pair("3")] == ["Tm3KX-Gal4", "TM3"]

    def test_a_marker_on_a_balancer_does_not_name_the_chromosome(self) -> None:
        assert female("w; +/CyO, Tb; +").pair("2")[1].symbols == ("CyO", "Tb")

    def test_a_translocation_balancer_stands_on_both(self) -> None:
        fly = female("w; T(2;3)SM6a-TM6B/+")
        assert [h.symbols for h in fly.pair("3")] == [(), ("T(2;3)SM6a-TM6B",)]
        assert female(format_genotype(fly)) == fly
        assert female("w; Sp/SM6a-TM6B; Dr") == female("w; Sp/SM6a-TM6B; Dr/SM6a-TM6B")


class TestSex:
    def test_one_text_serves_both(self) -> None:
        reading = read_genotype("w[1118]; Sp/CyO")
        assert set(reading.flies()) == {"female", "male"}
        assert reading.written_sex is None
        assert reading.male is not None
        assert reading.male.pair("X")[1].is_y
        assert format_genotype(reading.male) == "w[1118]/Y; Sp/CyO; +"

    def test_y_names_a_male(self) -> None:
        assert read_genotype("w/Y; +; +").written_sex == "male"

    @pytest.mark.parametrize(("text", "x"), [
        ("FM7a/w[1118]", ("w[1118]",)), ("y[1]/w[1118]", ("y[1]",)), ("w l(1)k3[1]/FM7a", ("FM7a",)),
        ("Df(1)k4, w/FM7c", ("FM7c",)),
    ])  # fmt: skip
    def test_males_of_a_heterozygous_x_and_a_note(self, text: str, x: tuple[str, ...]) -> None:
        reading = read_genotype(text)
        assert reading.male is not None
        assert reading.male.pair("X")[0].symbols == x
        assert "males-of-stock" in codes(reading, "note")

    def test_attached_x(self) -> None:
        reading = read_genotype("C(1)DX, y[1] f[1]/w[1118]/Y; +; +")
        assert reading.female is not None
        assert reading.male is not None
        assert [h.symbols[0] for h in reading.female.pair("X")] == ["C(1)DX", "Y"]
        assert [h.symbols[0] for h in reading.male.pair("X")] == ["w[1118]", "Y"]

    def test_a_marked_y(self) -> None:
        y = read_fly("w/Dp(1;Y)y[+]; +; +", "male").pair("X")[1]
        assert y.is_y
        assert y.elements[0].traits.restores == {"y"}

    def test_or_y(self) -> None:
        reading = read_genotype("w/y w or Y; +; +")
        assert format_genotype(reading.flies()["male"]) == "w/Y; +; +"
        assert format_genotype(reading.flies()["female"]) == "y w/w; +; +"


class TestChromosomes:
    def test_what_other_rows_say_settles_an_open_chromosome(self) -> None:
        known = {"kx-GAL4": Element("kx-GAL4", Kind.INSERTION, "3", component="GAL4")}
        assert read_genotype("w; kx-GAL4").is_open
        reading = read_genotype("w; kx-GAL4", known=known)
        assert reading.canonical == "w; +; kx-GAL4"
        assert "assumed-chromosome" in codes(reading)

    def test_the_place_outweighs_other_rows_and_that_is_said(self) -> None:
        known = {"kx-GAL4": Element("kx-GAL4", Kind.INSERTION, "3", component="GAL4")}
        reading = read_genotype("w; kx-GAL4; +", known=known)
        assert reading.canonical == "w; kx-GAL4; +"
        assert "other-rows" in codes(reading, "warning")
        assert read_genotype("w; kx-GAL4/CyO", known=known).canonical == "w; kx-GAL4/CyO; +"

    def test_the_question_shows_each_way_to_answer_it(self) -> None:
        first = read_genotype("w; UAS-k").problems[0]
        assert first.code == "which-chromosome"
        for answer in ("w; UAS-k; +", "w; +; UAS-k"):
            assert f"'{answer}'" in first.hint
            assert read_genotype(answer).canonical == answer

    def test_the_number_of_an_insertion_is_only_a_hint(self) -> None:
        assert read_genotype("w[*]; P{w[+mC]=UAS-k}3").canonical == "w[*]; +; UAS-k@3"
        assert read_genotype("w[*]; P{w[+mC]=UAS-k}1; +").canonical == "w[*]; UAS-k@1; +"
        assert read_genotype("w[*]; P{w[+mC]=UAS-k}1").is_open

    def test_elements_without_a_chromosome_make_no_fly(self) -> None:
        reading = read_genotype("P{lacW}kxg[k1]")
        assert reading.ok
        assert not reading.flies()
        assert [e.symbol for e in reading.elements] == ["lacW@kxg[k1]"]
        assert [e.chromosome for e in reading.elements] == [""]
        with pytest.raises(GenotypeError, match="leaves a chromosome open") as caught:
            read_fly("P{lacW}kxg[k1]", "female")
        assert "for 3 write '+; +; P{lacW}kxg[k1]'" in caught.value.hint

    def test_an_open_field_leaves_the_others_where_they_are(self) -> None:
        reading = read_genotype("w; kx-GAL4, UAS-k/+")
        assert reading.ok
        assert not reading.flies()
        assert [(e.symbol, e.chromosome) for e in reading.elements] == [("w", "X"), ("UAS-k", ""), ("kx-GAL4", "")]

    def test_elements_are_on_the_chromosome_of_their_field(self) -> None:
        assert element("w; kx-GAL4; UAS-k", "kx-GAL4").chromosome == "2"
        assert element("w; kx-GAL4/CyO", "kx-GAL4").chromosome == "2"


class TestProblems:
    def test_places_are_in_the_text_as_typed(self) -> None:
        text = "\ufeff\u2018w<sup>1118</sup>\u00a0; TM6Bb/+; +\u2019"
        first = read_genotype(text).problems[0]
        assert first.code == "balancer-typo"
        assert text[first.start : first.end] == "TM6Bb"

    def test_what_was_put_right_is_said(self) -> None:
        reading = read_genotype("w\u00a0; P{w[ +mC]=UAS\u2013k}attP40")
        notes = " ".join(p.message for p in reading.problems)
        assert "blanks" in notes
        assert "dashes" in notes

    @pytest.mark.parametrize("text", [
        "(" * 1_000_000, "w; " + "P{" * 500 + "}" * 500, ";".join(["w"] * 1500), "w; " + "/".join(["A"] * 1500),
        "w; " + "a" * 3900, "[" * 3000, "w " * 1900, "w" + "(" * 1900 + ")" * 1900, "-" * 3900, "P{a}" * 900, "a@" * 1900,
    ])  # fmt: skip
    def test_monsters_are_refused_or_read_and_never_raise(self, text: str) -> None:
        reading = read_genotype(text)
        assert reading.text == text
        assert len(reading.problems) < 2500

    def test_errors_come_first(self) -> None:
        severities = [p.severity for p in read_genotype("w; kxg[1]/TM6Bb; +/TM3").problems]
        assert severities[0] is Severity.ERROR
        assert severities == sorted(severities, key=list(Severity).index)

    def test_read_fly_says_what_is_wrong(self) -> None:
        with pytest.raises(GenotypeError) as caught:
            read_fly("w; Sp/TM6Bb", "female")
        assert "TM6B" in caught.value.hint
        assert caught.value.problems[0].code == "balancer-typo"


class TestJson:
    def test_the_fly_of_the_contract(self) -> None:
        fly = female("w[1118]; P{y[+t7.7] w[+mC]=AD-K12}attP40/CyO; TM6B, Tb[1]/+")
        assert fly_json(fly) == {
            "sex": "female", "X": [["w[1118]"], ["w[1118]"]], "2": [["AD-K12@attP40"], ["CyO"]],
            "3": [[], ["TM6B", "Tb[1]"]], "4": [[], []], "genotype": "w[1118]; AD-K12@attP40/CyO; +/TM6B, Tb[1]",
        }  # fmt: skip
        assert fly_json(read_fly("w", "male"))["X"] == [["w"], ["Y"]]

    def test_the_reading_of_the_contract(self) -> None:
        record = reading_json(read_genotype("w; Sp/CyO"))
        assert set(record) == {"text", "ok", "flies", "canonical", "elements", "problems"}
        assert set(record["flies"]) == {"female", "male"}
        assert [set(e) for e in record["elements"]] == [{"symbol", "kind", "chromosome", "site", "position_cM"}] * 3
        bad = reading_json(read_genotype("w; P{"))
        assert bad["flies"] == {"female": None, "male": None}
        assert {"severity", "code", "message", "start", "end"} <= set(bad["problems"][0])

    def test_styles(self) -> None:
        text = "w[1118]; P{y[+t7.7] w[+mC]=AD-K12}attP40; +"
        assert format_genotype(female(text), "standard") == text
        assert format_genotype(female(text)) == "w[1118]; AD-K12@attP40; +"


# tables of our own: what a fly worker reads in a genotype, and where the fault is in one that is none

#: text, and the pairs of the female in the form of the contract (those not named are wild type); `male X` where the X of
#: the male is not the first of hers
GENOTYPES: list[tuple[str, dict[str, list[list[str]]]]] = [
    ("w[1118]", {"X": [["w[1118]"], ["w[1118]"]]}),
    ("w[1118]/Y; +; +", {"X": [["w[1118]"], ["w[1118]"]]}),
    ("y[1] w[1118]", {"X": [["y[1]", "w[1118]"], ["y[1]", "w[1118]"]]}),
    ("yw; Sp/CyO; Dr/TM3, Sb",
     {"X": [["y", "w"], ["y", "w"]], "2": [["Sp"], ["CyO"]], "3": [["Dr"], ["TM3", "Sb"]]}),
    ("w; AD-K12@attP40; DBD-K12@attP2",
     {"X": [["w"], ["w"]], "2": [["AD-K12@attP40"], ["AD-K12@attP40"]], "3": [["DBD-K12@attP2"], ["DBD-K12@attP2"]]}),
    ("w[1118]; P{y[+t7.7] w[+mC]=AD-K12}attP40/CyO; P{y[+t7.7] w[+mC]=DBD-Q7}attP2/TM6B, Tb[1]",
     {"X": [["w[1118]"], ["w[1118]"]], "2": [["AD-K12@attP40"], ["CyO"]], "3": [["DBD-Q7@attP2"], ["TM6B", "Tb[1]"]]}),
    ("w; AD-K12 (attP40) / CyO ; +", {"X": [["w"], ["w"]], "2": [["AD-K12@attP40"], ["CyO"]]}),
    ("w; UAS-kx@VK00037 AD-K12@attP40; +",
     {"X": [["w"], ["w"]], "2": [["UAS-kx@VK00037", "AD-K12@attP40"], ["UAS-kx@VK00037", "AD-K12@attP40"]]}),
    ("w; AD-K12@attP40 UAS-kx@VK00037; +",
     {"X": [["w"], ["w"]], "2": [["UAS-kx@VK00037", "AD-K12@attP40"], ["UAS-kx@VK00037", "AD-K12@attP40"]]}),
    ("w; kx-GAL4(II)", {"X": [["w"], ["w"]], "2": [["kx-GAL4"], ["kx-GAL4"]]}),
    ("w; kx-GAL4 (III)", {"X": [["w"], ["w"]], "3": [["kx-GAL4"], ["kx-GAL4"]]}),
    ("w; +; UAS-kx/TM6B, Tb", {"X": [["w"], ["w"]], "3": [["UAS-kx"], ["TM6B", "Tb"]]}),
    ("w[*]; M{3xP3-RFP.attP=UAS-kx}ZH-86Fb",
     {"X": [["w[*]"], ["w[*]"]], "3": [["UAS-kx@ZH-86Fb"], ["UAS-kx@ZH-86Fb"]]}),
    ("w[1118]; PBac{y[+mDint2] w[+mC]=UAS-kx}VK00027",
     {"X": [["w[1118]"], ["w[1118]"]], "3": [["UAS-kx@VK00027"], ["UAS-kx@VK00027"]]}),
    ("+; cn[1] bw[1]; +", {"2": [["cn[1]", "bw[1]"], ["cn[1]", "bw[1]"]]}),
    ("b pr cn; st", {"2": [["b", "pr", "cn"], ["b", "pr", "cn"]], "3": [["st"], ["st"]]}),
    ("+; b[1] pr[1]/+; e[1]", {"2": [["b[1]", "pr[1]"], []], "3": [["e[1]"], ["e[1]"]]}),
    ("+; +; +; ci[D]/+", {"4": [["ci[D]"], []]}),
    ("w; +; +; ey[D]/ci[D]", {"X": [["w"], ["w"]], "4": [["ci[D]"], ["ey[D]"]]}),
    ("FM7a/w[1118]", {"X": [["w[1118]"], ["FM7a"]]}),
    ("FM7c/Y; +; +", {"X": [["FM7c"], ["FM7c"]]}),
    ("l(1)k3[1]/FM7a", {"X": [["l(1)k3[1]"], ["FM7a"]], "male X": [["FM7a"], ["Y"]]}),
    ("w UAS-kx@attP18; +; +", {"X": [["w", "UAS-kx@attP18"], ["w", "UAS-kx@attP18"]]}),
    ("y[1] v[1]; P{y[+t7.7] v[+t1.8]=k.IR}attP40",
     {"X": [["y[1]", "v[1]"], ["y[1]", "v[1]"]], "2": [["k.IR@attP40"], ["k.IR@attP40"]]}),
    ("w; Sco/SM6a", {"X": [["w"], ["w"]], "2": [["Sco"], ["SM6a"]]}),
    ("w; In(2LR)Gla/CyO", {"X": [["w"], ["w"]], "2": [["CyO"], ["In(2LR)Gla"]]}),
    ("w; Df(2L)k4/CyO; +", {"X": [["w"], ["w"]], "2": [["Df(2L)k4"], ["CyO"]]}),
    ("w; +; Df(3R)k6/TM6C, Sb[1] Tb[1]",
     {"X": [["w"], ["w"]], "3": [["Df(3R)k6"], ["TM6C", "Sb[1]", "Tb[1]"]]}),
    ("w; l(2)k5[1] FRT40A/CyO, Kr-GFP",
     {"X": [["w"], ["w"]], "2": [["FRT40A", "l(2)k5[1]"], ["CyO", "Kr-GFP"]]}),
    ("w; FRT42D l(2)k6[1]/CyO", {"X": [["w"], ["w"]], "2": [["FRT42D", "l(2)k6[1]"], ["CyO"]]}),
    ("w; +; FRT82B l(3)k2[1]/TM6B, Tb[1]",
     {"X": [["w"], ["w"]], "3": [["FRT82B", "l(3)k2[1]"], ["TM6B", "Tb[1]"]]}),
    ("P{ry[+t7.2]=hsFLP}1 w; +; +", {"X": [["w", "hsFLP@1"], ["w", "hsFLP@1"]]}),
    ("w; tub-GAL80[ts]@20/CyO; +", {"X": [["w"], ["w"]], "2": [["tub-GAL80[ts]@20"], ["CyO"]]}),
    ("w[1118]; Sp/CyO; TM2/TM6B, Tb[1]",
     {"X": [["w[1118]"], ["w[1118]"]], "2": [["Sp"], ["CyO"]], "3": [["TM2"], ["TM6B", "Tb[1]"]]}),
    ("w; +; MKRS/TM6B", {"X": [["w"], ["w"]], "3": [["MKRS"], ["TM6B"]]}),
    ("w; T(2;3)SM6a-TM6B/+",
     {"X": [["w"], ["w"]], "2": [[], ["T(2;3)SM6a-TM6B"]], "3": [[], ["T(2;3)SM6a-TM6B"]]}),
    ("C(1)DX, y[1] f[1]/Y; +; +", {"X": [["C(1)DX", "y[1]", "f[1]"], ["Y"]], "male X": [[], ["Y"]]}),
    ("w/Dp(1;Y)y[+]; +; +", {"X": [["w"], ["w"]], "male X": [["w"], ["Dp(1;Y)y[+]"]]}),
    ("w; Dp(1;2)k1/+; +", {"X": [["w"], ["w"]], "2": [["Dp(1;2)k1"], []]}),
    ("w1118;Sp/CyO;MKRS/TM6B,Tb",
     {"X": [["w[1118]"], ["w[1118]"]], "2": [["Sp"], ["CyO"]], "3": [["MKRS"], ["TM6B", "Tb"]]}),
    ("w<sup>1118</sup>; Sp/CyO", {"X": [["w[1118]"], ["w[1118]"]], "2": [["Sp"], ["CyO"]]}),
    ("w^{1118}; Sp/CyO", {"X": [["w[1118]"], ["w[1118]"]], "2": [["Sp"], ["CyO"]]}),
    ("w\u00b9\u00b9\u00b9\u2078; Sp/CyO", {"X": [["w[1118]"], ["w[1118]"]], "2": [["Sp"], ["CyO"]]}),
    ("+", {}),
    ("Canton-S", {}),
    ("+; +; +", {}),
    ("w; kx[7]/CyO; +", {"X": [["w"], ["w"]], "2": [["kx[7]"], ["CyO"]]}),
    ("w; P{lacW}e[k1]/TM3, Sb[1]", {"X": [["w"], ["w"]], "3": [["lacW@e[k1]"], ["TM3", "Sb[1]"]]}),
    ("w; P{lacW}l(2)k9[1]/CyO", {"X": [["w"], ["w"]], "2": [["lacW@l(2)k9[1]"], ["CyO"]]}),
    ("w; AD-K12@attP40/UAS-kx@attP40; +", {"X": [["w"], ["w"]], "2": [["AD-K12@attP40"], ["UAS-kx@attP40"]]}),
    ("w; attP40; +", {"X": [["w"], ["w"]], "2": [["attP40"], ["attP40"]]}),
    ("w; +; attP2", {"X": [["w"], ["w"]], "3": [["attP2"], ["attP2"]]}),
    ("w; sna[Sco]/CyO", {"X": [["w"], ["w"]], "2": [["sna[Sco]"], ["CyO"]]}),
    ("w; wg[Sp-1]/CyO", {"X": [["w"], ["w"]], "2": [["wg[Sp-1]"], ["CyO"]]}),
    ("w; +; TM3, Ser[1]/Sb[1]", {"X": [["w"], ["w"]], "3": [["Sb[1]"], ["TM3", "Ser[1]"]]}),
    ("w; +; Dr[Mio]/TM3, P{w[+mC]=kx}3, Sb[1]",
     {"X": [["w"], ["w"]], "3": [["Dr[Mio]"], ["TM3", "Sb[1]", "kx@3"]]}),
    ("w; CyO-GFP/Sp", {"X": [["w"], ["w"]], "2": [["Sp"], ["CyO-GFP"]]}),
    ("w; Sp/cyo", {"X": [["w"], ["w"]], "2": [["Sp"], ["CyO"]]}),
    ("w; +; Ubx[130]/TM2", {"X": [["w"], ["w"]], "3": [["Ubx[130]"], ["TM2"]]}),
    ("Basc/+; +; +", {"X": [[], ["Basc"]]}),
    ("w; R76F05-kx@attP40; +", {"X": [["w"], ["w"]], "2": [["R76F05-kx@attP40"], ["R76F05-kx@attP40"]]}),
    ("Mi{ET1}e[k1]", {"3": [["ET1@e[k1]"], ["ET1@e[k1]"]]}),
    ("w[1118] f[1]; Sp/CyO; +", {"X": [["w[1118]", "f[1]"], ["w[1118]", "f[1]"]], "2": [["Sp"], ["CyO"]]}),
    ("w sn[3]; +; +", {"X": [["w", "sn[3]"], ["w", "sn[3]"]]}),
    ("+/w[1118]; b[1]/CyO", {"X": [["w[1118]"], []], "2": [["b[1]"], ["CyO"]], "male X": [[], ["Y"]]}),
    ("w; 20XUAS-kx@su(Hw)attP5; +",
     {"X": [["w"], ["w"]], "2": [["20XUAS-kx@su(Hw)attP5"], ["20XUAS-kx@su(Hw)attP5"]]}),
    ("y[1] w[1118]/y[1] w[1118]; +; +", {"X": [["y[1]", "w[1118]"], ["y[1]", "w[1118]"]]}),
]  # fmt: skip

#: text, the first problem, where the characters that it points at begin, and those characters
MALFORMED: list[tuple[str, str, int, str]] = [
    ("", "empty", 0, ""),
    ("   ", "empty", 0, "   "),
    ("\u00a0\u00a0", "empty", 0, "\u00a0\u00a0"),
    (";;;", "empty", 0, ";;;"),
    ("w; Sp/CyO; TM3/TM6B; +; +", "five-fields", 24, "+"),
    ("w; Sco/CyO/Sp; +", "three-homologues", 3, "Sco/CyO/Sp"),
    ("w; Sp/TM3, Sb; +", "chromosomes-disagree", 3, "Sp/TM3, Sb"),
    ("w; CyO/+; Dr/SM6a", "chromosomes-disagree", 10, "Dr/SM6a"),
    ("w; FM7c/+; +", "wrong-place", 3, "FM7c/+"),
    ("w; DBD-K@attP2; AD-K@attP40", "wrong-place", 3, "DBD-K@attP2"),
    ("w; +; UAS-kx/Y", "y-on-autosome", 6, "UAS-kx/Y"),
    ("w/Y/Y; +; +", "three-homologues", 0, "w/Y/Y"),
    ("Y/Y; +; +", "sex-chromosomes", 0, "Y/Y"),
    ("w; P{UAS-kx; +", "bracket", 4, "{"),
    ("w; P{w[+mC=UAS-kx}2; +", "bracket", 6, "[+mC=UAS-kx}"),
    ("w; P{w[+mC]=UAS-kx)attP40; +", "bracket", 4, "{w[+mC]=UAS-kx)"),
    ("w[1118]]; Sp/CyO", "bracket", 7, "]"),
    ("w; Sp)/CyO", "bracket", 5, ")"),
    ("w; Sp//CyO", "empty-homologue", 5, "/"),
    ("w; Sp/; +", "empty-homologue", 5, "/"),
    ("w; Sp/Cy0; +", "balancer-typo", 6, "Cy0"),
    ("w; Sp/TM6Bb; +", "balancer-typo", 6, "TM6Bb"),
    ("w; CyO SM6a/Sp; +", "two-balancers", 3, "CyO SM6a"),
    ("w; AD-K@attP40, UAS-k@attP40; +", "same-site", 3, "AD-K@attP40, UAS-k@attP40"),
    ("w; P{a}1P{b}2/CyO", "run-together", 3, "P{a}1P{b}2"),
    ("w; Sp/CyO x w; Dr/TM3", "cross", 10, "x"),
    ("w; Sp or Sco/CyO", "choice", 6, "or"),
    ("#NAME?", "spreadsheet-error", 0, "#NAME?"),
    ("w; #REF!; +", "spreadsheet-error", 3, "#REF!"),
    ("=A1&B1", "formula", 0, "=A1&B1"),
    ("w; 1-Sep/CyO; +", "date", 3, "1-Sep"),
    ("w; 2.30E+05/CyO", "number", 3, "2.30E+05"),
    ("w; Sp/CyO\nw; Dr/TM3, Sb", "two-genotypes", 0, "w; Sp/CyO\nw; Dr/TM3, Sb"),
    ("w; Sp\x00/CyO", "control-character", 5, "\x00"),
    ("w; \u202eSp/CyO", "control-character", 3, "\u202e"),
    ("w; Sp/CyO; + Dr", "plus-with-symbols", 11, "+ Dr"),
    ("w[]; Sp/CyO", "empty-allele", 0, "w[]"),
    ("w; ???; +", "no-symbol", 3, "???"),
    ("CyO/+; w", "wrong-order", 0, "CyO/+"),
    ("w/y; +; +", "y-or-yellow", 0, "w/y"),
    ("w; Sp/(see note); +", "remark-only", 6, "(see note)"),
    ("w; Sp/CyOxTM3", "balancer-typo", 6, "CyOxTM3"),
    ("w; CyO-TM3/Sp", "two-balancers", 3, "CyO-TM3"),
    ("w; Sp/T(2;3)SM6a-TM6B", "linked", 3, "Sp/T(2;3)SM6a-TM6B"),
    ("w; Df(5L)k1/CyO", "no-such-chromosome", 3, "Df(5L)k1"),
    ("UAS-kx (V)", "no-such-chromosome", 0, "UAS-kx (V)"),
    ("w; w__x__y; +", "underscores", 3, "w__x__y"),
    ("((((((((((((((((w))))))))))))))))", "too-deep", 12, "("),
    ("w; UAS-kx/UAS-ky@attP2/TM3; +", "three-homologues", 3, "UAS-kx/UAS-ky@attP2/TM3"),
    ("w; b[1]/e[1]; +", "chromosomes-disagree", 3, "b[1]/e[1]"),
    ("w; Sp Y/CyO; +", "y-with-others", 3, "Sp Y"),
    ("+; +; TM6B/TM6B/Sb", "three-homologues", 6, "TM6B/TM6B/Sb"),
    ("R12-GAL4>UAS-kx", "nothing-known", 0, "R12-GAL4>UAS-kx"),
    ("ask Ida", "nothing-known", 0, "ask Ida"),
    ("w; +; kx_a_b_c_d; +", "underscores", 6, "kx_a_b_c_d"),
    ("w; TM3/Sp; CyO/Dr", "chromosomes-disagree", 3, "TM3/Sp"),
    ("w; 17/05/2024; +", "date", 3, "17/05/2024"),
    ("{\"x\"}", "braces", 0, "{\"x\"}"),
]  # fmt: skip

#: text, and the elements of the contract: symbol, kind, chromosome, site, and the place on the map where it has one
ELEMENTS: list[tuple[str, list[tuple[str, str, str, str | None, float | None]]]] = [
    ("y[1] w[1118]", [("y[1]", "allele", "X", None, 0.0), ("w[1118]", "allele", "X", None, 1.5)]),
    ("w[1118]; AD-K12@attP40/CyO", [
        ("w[1118]", "allele", "X", None, 1.5), ("AD-K12@attP40", "insertion", "2", "attP40", 15.1),
        ("CyO", "balancer", "2", None, None),
    ]),
    ("+; cn[1] bw[1]/b[1]; e[1]", [
        ("cn[1]", "allele", "2", None, 57.5), ("bw[1]", "allele", "2", None, 104.5), ("b[1]", "allele", "2", None, 48.5),
        ("e[1]", "allele", "3", None, 70.7),
    ]),
    ("+; +; Df(3R)k6/TM6B, Tb[1]", [
        ("Df(3R)k6", "aberration", "3", None, None), ("TM6B", "balancer", "3", None, None), ("Tb[1]", "allele", "3", None, 90.6),
    ]),
    ("w[1118]/Dp(1;Y)y[+]; +; +", [("w[1118]", "allele", "X", None, 1.5), ("Dp(1;Y)y[+]", "Y", "Y", None, None)]),
    ("+; kxg7; +", [("kxg7", "unknown", "2", None, None)]),
]  # fmt: skip


class TestTables:
    def test_the_tables_have_no_row_twice(self) -> None:
        for table in (GENOTYPES, MALFORMED):
            texts = [row[0] for row in table]
            assert len(set(texts)) == len(texts)

    @pytest.mark.parametrize(("text", "pairs"), GENOTYPES, ids=lambda v: v if isinstance(v, str) else "")
    def test_flies(self, text: str, pairs: dict[str, list[list[str]]]) -> None:
        record = reading_json(read_genotype(text))
        assert record["ok"]
        autosomes = {name: pairs.get(name, [[], []]) for name in ("2", "3", "4")}
        x = pairs.get("X", [[], []])
        for sex, its_x in (("female", x), ("male", pairs.get("male X", [x[0], ["Y"]]))):
            found = dict(record["flies"][sex])
            written = found.pop("genotype")
            assert found == {"sex": sex, "X": its_x, **autosomes}
            assert reading_json(read_genotype(written))["flies"][sex] == record["flies"][sex]

    @pytest.mark.parametrize(("text", "elements"), ELEMENTS, ids=lambda v: v if isinstance(v, str) else "")
    def test_elements(self, text: str, elements: list[tuple[str, str, str, str | None, float | None]]) -> None:
        keys = ("symbol", "kind", "chromosome", "site", "position_cM")
        assert [tuple(e[k] for k in keys) for e in reading_json(read_genotype(text))["elements"]] == elements

    @pytest.mark.parametrize(("text", "code", "start", "characters"), MALFORMED)
    def test_faults(self, text: str, code: str, start: int, characters: str) -> None:
        reading = read_genotype(text)
        assert not reading.ok
        assert reading.flies() == {}
        first = reading.problems[0]
        assert (first.code, first.severity) == (code, Severity.ERROR)
        assert text[start : start + len(characters)] == characters
        # a blank beside the symbols counts as their place
        pointed = text[first.start : first.end]
        assert characters in (pointed, pointed.strip())
        assert first.start <= start <= start + len(characters) <= first.end

    def test_a_megabyte_of_brackets_is_refused_with_a_short_answer(self) -> None:
        for bracket in "([{)]}":
            reading = read_genotype(bracket * 1_000_000)
            assert not reading.ok
            assert [p.code for p in reading.problems] == ["too-long"]
            assert len(reading.problems[0].message) < 200
            assert reading.problems[0].text == ""

    @pytest.mark.parametrize(("chromosome", "canonical"), [("2", "w; kx-GAL4; +"), ("3", "w; +; kx-GAL4")])
    def test_known_settles_an_open_field_either_way(self, chromosome: str, canonical: str) -> None:
        assert codes(read_genotype("w; kx-GAL4"), "warning") == {"which-chromosome"}
        known = {"kx-GAL4": Element("kx-GAL4", Kind.INSERTION, chromosome, component="GAL4")}
        reading = read_genotype("w; kx-GAL4", known=known)
        assert (reading.ok, reading.canonical) == (True, canonical)
        assert next(e for e in reading.elements if e.symbol == "kx-GAL4").chromosome == chromosome

    def test_tm3_alone_is_assumed_to_carry_stubble_and_the_warning_points_at_it(self) -> None:
        text = "w; Sp/CyO; +/TM3"
        reading = read_genotype(text)
        (warning,) = [p for p in reading.problems if p.severity is Severity.WARNING]
        assert (warning.code, text[warning.start : warning.end]) == ("assumed-marker", "TM3")
        assert "Sb" in warning.message
        assert reading.assumed
        carried = female(text).pair("3")[1].elements[0].traits
        assert "stubble bristles" in carried.dominant
        other = female("w; Sp/CyO; +/TM3, Ser[1]").pair("3")[1]
        assert "stubble bristles" not in {s for e in other.elements for s in e.traits.dominant}
