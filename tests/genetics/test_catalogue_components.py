"""Classes of transgene by their short names, in the spellings that laboratories use (all names invented but the trade's)."""

from __future__ import annotations

import pytest

from crossplan.errors import InputError
from crossplan.genetics.catalogue import ALLOWED, Catalogue, ComponentEntry, default_catalogue, read_tables
from crossplan.genetics.element import PLAIN

SPELLINGS = {
    "AD": "AD-K12 K12-AD K12_AD K12.AD K12-p65.AD K12-p65AD K12-p65ADZp K12.p65ADZp p65ADZp-K12 K12-p65AD:Zp"
    " K12-p65AD::Zp p65.AD-K12 K12-VP16.AD K12-VP16AD K12-dVP16AD Gal4AD-K12 K12-GAL4.AD AP-2AD K12AD"
    " K12-pBPp65ADZpUw Trojan-p65AD.2 T2A-p65AD Tdc2-AD AD(K12) Zip+-p65AD-K12 K12-Zip::p65 K12-p65(AD) empty-AD",
    "DBD": "DBD-Q01 Q01-DBD Q01_DBD Q01.DBD Q01-GAL4.DBD Q01-Gal4DBD Q01-ZpGdbd Q01.ZpGdbd ZpGdbd-Q01 Q01-ZpGDBD"
    " Q01-Zp:GAL4DBD Q01-Zp::GAL4DBD Q01-ZpGAL4DBD Q01-pBPZpGdbdUw unc-4DBD Trojan-GAL4DBD.0 T2A-GAL4DBD"
    " Q01-Gal4-DBD DBD(Q01) ZpGAL4.DBD-Q01 Q01-GAL4(DBD) TG4DBD-Q01 empty-DBD Q01-Gal4DBD::Zip-",
    "GAL4": "kx-GAL4 kx-Gal4 kxGal4 GAL4-kx GAL4[kx] kx>GAL4 GawB Trojan-GAL4.0 kx-T2A-GAL4 TG4-kx CRIMIC.TG4.1"
    " kx-GAL4::VP16 elav-GS GSG-kx elav-GeneSwitch ElavSwitch Act5C>stop>GAL4 kx-G4 matalpha4-GAL-VP16",
    "LexA": "kx-LexA LexA-kx LexA::p65-kx kx-nlsLexA::p65 kx-LHG LHV2-kx kx-LexA.DBD kx-nlsLexADBD",
    "QF": "kx-QF kx-QF2 kx-QF2w QF2-kx kx-QF2G4H kx-QF.AD kx-QFAD kx-QFDBD",
    "effector": "UAS-CsChrimson 20XUAS-IVS-CsChrimson.mVenus UAS-ReaChR UAS-ChR2-XXL UAS-ChETA UAS-GtACR1 UAS-ACR1"
    " UAS-HcKCR1 UAS-WiChR UAS-Jaws UAS-bPAC UAS-miniSOG UAS-OPN3 UAS-dTrpA1 UAS-TRPM8 UAS-TRPV1 UAS-P2X2"
    " UAS-NaChBac UAS-shi[ts1] UAS-shits UAS-shi[K44A] UAS-Kir2.1 UAS-dORK UAS-EKO UAS-TNT UAS-BoNT-C UAS-HisCl1"
    " UAS-rpr UAS-DTI UAS-egr UAS-para.RNAi UAS-para.IR HMS01234 P{TRiP.JF01234} KK101234 UAS-xyz LexAop-TNT"
    " QUAS-CsChrimson UAS-PTX GMR-hid ey-hid EP EPgy2 XP",
    "reporter": "UAS-GFP UAS-mCD8::GFP UAS-CD4-tdTom UAS-mCherry UAS-RedStinger UAS-lacZ UAS-GCaMP6s UAS-jRGECO1a"
    " UAS-ArcLight UAS-ASAP2f UAS-iGluSnFR UAS-GRAB-DA UAS-DenMark UAS-syt-eGFP UAS-PA-GFP UAS-Kaede UAS-CaLexA"
    " UAS-EPAC UAS-smGdP-HA 13XLexAop2-IVS-myr::GFP QUAS-mtdTomato ActGFP Ubi-mRFP.nls His2Av-mRFP His-RFP 3xP3-RFP"
    " Rh1-GFP UAS>stop>mCD8-GFP UAS-trans-Tango lacW PZ",
    "repressor": "tub-GAL80 tubP-GAL80[ts] GAL80-W21 LexAop-GAL80 tub-QS QS KZip+ UAS-KZip-",
    "helper": "hs-FLP hsFLP hsflp122 FLP ey-FLP eyFLP kx-FLP kx-FLPG5 UAS-Dcr-2 UAS-Dicer2 FRT40A neoFRT82B vas-Cas9"
    " nos-Cas9.P UAS-Cas9 U6:3-gRNA gRNA-qx sgRNA-qx nos-int vas-phiC31 hs-Cre Crew Delta2-3 hs-I-SceI hs-hid MIC"
    " SUPor-P",
}


def component(name: str) -> ComponentEntry:
    found = default_catalogue().component(name)
    assert found is not None, name
    return found


@pytest.mark.parametrize(("cls", "name"), [(cls, name) for cls, names in SPELLINGS.items() for name in names.split()])
def test_class_by_any_spelling(cls: str, name: str) -> None:
    assert component(name).cls == cls


@pytest.mark.parametrize(
    "name",
    ["BAD-1", "Sb", "w+", "CyO", "attP40", "para", "Gad1", "SMAD", "HEAD", "Dad", "Ubx", "repo", "qxFlpStop", ""],
)
def test_what_is_no_class_of_transgene(name: str) -> None:
    assert default_catalogue().component(name) is None


@pytest.mark.parametrize(
    ("name", "carries"),
    [
        ("AD-K12", ("w+",)),
        ("Trojan-GAL4.0", ()),
        ("CRIMIC.TG4.1", ("3xP3-GFP",)),
        ("MIC", ("y+",)),
        ("EPgy2", ("w+", "y+")),
        ("lacW", ("w+",)),
        ("PZ", ("ry+",)),
        ("HMS01234", ("v+", "y+")),
        ("vas-Cas9", ()),
        ("FRT82B", ()),
    ],
)
def test_usual_transformation_markers(name: str, carries: tuple[str, ...]) -> None:
    assert component(name).carries == carries


def test_a_class_without_marker_gives_no_pigment() -> None:
    assert default_catalogue().insertion_traits((), component("Trojan-GAL4.0")) == PLAIN


@pytest.mark.parametrize(
    ("name", "retinal", "dark"),
    [
        ("UAS-CsChrimson", True, True),
        ("UAS-GtACR1", True, True),
        ("UAS-HcKCR1", True, True),
        ("UAS-ChR2-XXL", False, True),
        ("UAS-bPAC", False, True),
        ("UAS-Kir2.1", False, False),
        ("UAS-dTrpA1", False, False),
    ],
)
def test_retinal_and_darkness(name: str, retinal: bool, dark: bool) -> None:
    entry = component(name)
    assert (entry.needs_retinal, entry.needs_dark) == (retinal, dark)


def test_whatever_light_opens_is_kept_dark() -> None:
    for entry in default_catalogue().components():
        if entry.activation == "light":
            assert entry.needs_dark, entry.name
        else:
            assert not entry.needs_retinal, entry.name


def test_whatever_heat_turns_on_has_a_temperature() -> None:
    hot = [e for e in default_catalogue().components() if e.activation == "heat"]
    assert len(hot) >= 4
    for entry in hot:
        assert entry.test_C is not None, entry.name
        assert entry.rear_max_C is not None, entry.name


@pytest.mark.parametrize(
    ("name", "sign"),
    [
        ("Ubi-GFP", "green fluorescence"),
        ("Ubi-mRFP.nls", "red fluorescence"),
        ("Rh1-GFP", "green fluorescence"),
        ("GMR-hid", "tiny eyes"),
        ("UAS-GFP", ""),
    ],
)
def test_signs_without_a_driver(name: str, sign: str) -> None:
    assert component(name).sign == sign


def test_halves_of_other_systems_are_no_halves_of_gal4() -> None:
    for name in ("kx-QF.AD", "kx-QFDBD", "kx-LexA.DBD"):
        assert component(name).cls not in ("AD", "DBD")
        assert "half" in component(name).caution


def test_every_class_word_is_used() -> None:
    used = {entry.cls for entry in default_catalogue().components()}
    assert used == ALLOWED["class"] - {""}


def test_drivers_and_effectors_name_their_control() -> None:
    for entry in default_catalogue().components():
        if entry.cls in ("AD", "DBD", "GAL4", "LexA", "QF", "effector") and not entry.sign:
            assert entry.control_role, entry.name


def test_a_row_without_class_is_refused() -> None:
    tables = read_tables()
    tables["components"][0]["class"] = ""
    with pytest.raises(InputError, match="lacks class"):
        Catalogue(tables)
