"""The demonstration type's geometry against figures worked by hand.

Frame n at STA 100 + 20 (n - 1), plug frames 20 and 40 in aft of frame 24, 40 stringers
9 degrees apart at a radius of 56 in, wing rib n at WS 20 n.
"""

from __future__ import annotations

import math
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from fleet.location.geometry import Section, TypeGeometry, geometry_from_toml

INCH = 25.4
FILE = Path(__file__).parents[2] / "fixtures" / "ard52.toml"
GEOMETRY = geometry_from_toml(FILE.read_text())
FUSELAGE = GEOMETRY.section("FUS")
RADIUS = 56 * INCH


def arc(degrees: float) -> float:
    return math.radians(degrees) * RADIUS


def test_the_same_text_is_parsed_once() -> None:
    assert geometry_from_toml(FILE.read_text()) is GEOMETRY


def test_every_section_is_there() -> None:
    assert [s.code for s in GEOMETRY.sections] == [
        "FUS", "DOOR-1L", "DOOR-1R", "DOOR-2L", "DOOR-2R", "DOOR-CARGO",
        "WING-L", "WING-R", "HT-L", "HT-R", "FIN", "NAC-1", "NAC-2",
    ]  # fmt: skip
    kinds = {s.code: s.kind for s in GEOMETRY.sections}
    assert kinds["FUS"] == kinds["NAC-1"] == "shell"
    assert kinds["WING-L"] == kinds["FIN"] == "surface"


@pytest.mark.parametrize(
    ("label", "station", "base", "stretched", "on_map"),
    [
        ("1", "100", 100, 100, 100),
        ("24", "560", 560, 560, 560),
        ("24A", "560A", None, 580, 580),
        ("24B", "560B", None, 600, 600),
        ("25", "580", 580, 620, 620),
        ("48", "1040", 1040, 1080, 1080),
    ],
)
def test_frames_stand_where_their_variant_has_them(
    label: str, station: str, base: float | None, stretched: float, on_map: float
) -> None:
    frame = FUSELAGE.frame(label)
    assert frame is not None
    assert frame.station_label == station
    assert frame.map_mm == pytest.approx(on_map * INCH)
    assert frame.x_mm("S") == pytest.approx(stretched * INCH)
    if base is None:
        assert frame.x_mm("base") is None
    else:
        assert frame.x_mm("base") == pytest.approx(base * INCH)


def test_there_are_fifty_frames_and_forty_stringers() -> None:
    assert len(FUSELAGE.frames) == 50
    assert [f.ordinal for f in FUSELAGE.frames] == list(range(1, 51))
    labels = [t.label for t in FUSELAGE.stringers]
    assert labels[:2] == ["S-1", "S-2R"]
    assert labels[20:22] == ["S-21", "S-20L"]
    assert len(labels) == 40
    keel = FUSELAGE.stringer("S-21")
    assert keel is not None
    assert keel.s_mm == pytest.approx(-math.pi * RADIUS)


def test_a_cylinder_of_two_hundred_inches_has_its_area() -> None:
    # 2 pi x 56 in x 200 in = 45.401 m2.
    assert FUSELAGE.wrap_mm is not None
    assert FUSELAGE.wrap_mm * 200 * INCH / 1e6 == pytest.approx(45.401, abs=5e-4)


@pytest.mark.parametrize(
    ("station", "radius"),
    [(60, 20), (150, 38), (240, 56), (700, 56), (900, 56), (980, 38), (1060, 20)],
)
def test_the_radius_follows_nose_and_tail(station: float, radius: float) -> None:
    map_mm = FUSELAGE.map_of(station * INCH, "base")
    assert FUSELAGE.radius_at(map_mm) == pytest.approx(radius * INCH)


@given(st.floats(60, 1100), st.sampled_from(["base", "S"]))
def test_true_distance_and_map_agree_both_ways(station: float, variant: str) -> None:
    x_mm = min(station, 1060 if variant == "base" else 1100) * INCH
    map_mm = FUSELAGE.map_of(x_mm, variant)
    assert FUSELAGE.x_of(map_mm, variant) == pytest.approx(x_mm)


def test_a_plug_exists_only_where_it_is_built_in() -> None:
    assert FUSELAGE.x_of(590 * INCH, "base") is None
    assert FUSELAGE.x_of(590 * INCH, "S") == 590 * INCH
    assert FUSELAGE.map_of(570 * INCH, "base") == pytest.approx(610 * INCH)


@pytest.mark.parametrize(
    ("station", "half"),
    [(60, 0), (85, 1), (100, 2), (109, 2), (110, 3), (119.9, 3), (120, 4), (1099, 101)],
)
def test_half_bays_along(station: float, half: int) -> None:
    # Bay 0 lies ahead of frame 1; frame n of the map axis begins half-bay 2 n.
    assert FUSELAGE.half_along(station * INCH) == half


@pytest.mark.parametrize(
    ("degrees", "half"),
    [(0, 0), (4.4, 0), (4.6, 1), (9, 2), (180, 40), (-180, 40), (-0.1, 79), (-9, 78)],
)
def test_half_bays_around(degrees: float, half: int) -> None:
    assert FUSELAGE.half_across(arc(degrees)) == half


@given(st.floats(-math.pi, math.pi, exclude_max=True))
def test_the_half_bay_holds_the_point(angle: float) -> None:
    half = FUSELAGE.half_across(angle * RADIUS)
    turn = angle % (2 * math.pi)
    assert half % 80 in {int(turn / math.radians(4.5) + e) % 80 for e in (-1e-9, 1e-9)}


def test_the_way_round_is_the_shorter_one() -> None:
    apart = FUSELAGE.arc_between(arc(170), arc(-170), FUSELAGE.map_of(500, "base"))
    assert apart == pytest.approx(arc(20) * FUSELAGE.scale_at(500))


def test_skin_covers_every_station() -> None:
    for tenth in range(600, 11001, 5):
        for degrees in (0, 60, 120, 175, -60, -120):
            panel = FUSELAGE.panel_at(tenth / 10 * INCH, arc(degrees))
            assert panel is not None, (tenth / 10, degrees)


@pytest.mark.parametrize(
    ("station", "degrees", "thickness", "panel"),
    [
        (640, 20, 1.2, "CROWN 500-700"),
        (640, 60, 1.4, "UPPER SIDE R 500-700"),
        (640, -120, 1.6, "LOWER SIDE L 500-700"),
        (640, 179, 1.8, "BELLY 500-700"),
        (70, 20, 6.0, "RADOME"),
        (800, 103, 2.0, "LOWER SIDE R 700-900"),
    ],
)
def test_skin_thickness(
    station: float, degrees: float, thickness: float, panel: str
) -> None:
    map_mm = FUSELAGE.map_of(station * INCH, "base")
    found = FUSELAGE.panel_at(map_mm, arc(degrees))
    assert found is not None
    assert found.label == panel
    assert FUSELAGE.thickness_at(map_mm, arc(degrees)) == thickness


def test_panels_keep_their_engineering_columns() -> None:
    crown = GEOMETRY.panel("FUS", "CROWN 500-700")
    assert (crown.bending_1g_mpa, crown.bending_limit_mpa) == (25.0, 62.5)
    assert crown.radius_mm == pytest.approx(RADIUS)
    assert (crown.material.name, crown.material.temper) == ("2024", "T3")
    assert crown.material.clad
    assert crown.material.clad_mm_per_side == 0.06
    # 25 at STA 700 falling straight to 5 at STA 1060, taken at the panel's fore edge.
    aft = GEOMETRY.panel("FUS", "CROWN 900-1000")
    assert aft.bending_1g_mpa == pytest.approx(25 - 20 * 200 / 360, abs=0.05)
    side = GEOMETRY.panel("FUS", "UPPER SIDE R 500-700")
    assert side.bending_1g_mpa is None
    assert side.ultimate_running_load_n_per_mm is None
    lower = GEOMETRY.panel("WING-L", "LOWER 0-160")
    assert (lower.thickness_mm, lower.bending_1g_mpa) == (3.5, 70.0)
    assert lower.bending_limit_mpa == 175.0


def test_criticality_and_pressure() -> None:
    for panel in FUSELAGE.panels:
        fairing = panel.label == "RADOME"
        assert panel.criticality == ("secondary" if fairing else "principal")
        assert panel.pressurised == (panel.label not in ("RADOME", "TAIL CONE"))
        assert panel.criticality_source


def test_a_cutout_is_known_with_its_distance() -> None:
    map_mm = FUSELAGE.map_of(750 * INCH, "base")
    nearest = FUSELAGE.nearest_cutout(map_mm, arc(120), "base")
    assert nearest is not None
    assert (nearest[0].label, nearest[0].filled_by) == ("AFT CARGO", "DOOR-CARGO")
    assert nearest[1] == pytest.approx(10 * INCH)
    inside = FUSELAGE.cutout_at(FUSELAGE.map_of(800 * INCH, "base"), arc(120))
    assert inside is nearest[0]


def test_a_corner_distance_is_a_diagonal() -> None:
    map_mm = FUSELAGE.map_of(750 * INCH, "base")
    cargo = next(c for c in FUSELAGE.cutouts if c.label == "AFT CARGO")
    s_mm = arc(105) - 10 * INCH
    apart = FUSELAGE.distance_to_box(cargo.box, map_mm, s_mm, "base")
    assert apart == pytest.approx(math.hypot(10, 10) * INCH)


def test_the_window_belt_has_one_window_a_bay() -> None:
    windows = [c for c in FUSELAGE.cutouts if c.kind == "window"]
    # 31 bays from frame 9 to 40, two more in the plug, on both sides.
    assert len(windows) == 2 * 33
    for window in windows:
        assert window.box.map2_mm - window.box.map1_mm == pytest.approx(9 * INCH)
    missing = [w for w in windows if FUSELAGE.x_of(w.box.map1_mm, "base") is None]
    assert len(missing) == 2 * 2


def test_a_window_of_the_plug_is_infinitely_far_on_the_base_variant() -> None:
    window = next(c for c in FUSELAGE.cutouts if c.label == "WINDOW R 24-24A")
    far = FUSELAGE.distance_to_box(window.box, 555 * INCH, arc(85), "base")
    near = FUSELAGE.distance_to_box(window.box, 555 * INCH, arc(85), "S")
    assert far == math.inf
    assert near == pytest.approx(10.5 * INCH)


def test_joints_and_frames_have_distances() -> None:
    map_mm = FUSELAGE.map_of(652 * INCH, "base")
    joint = FUSELAGE.nearest_joint(map_mm, arc(99) + 3 * INCH, "base")
    assert joint is not None
    assert joint[0].label == "LAP S-12R"
    assert joint[1] == pytest.approx(3 * INCH)
    butt = FUSELAGE.nearest_joint(FUSELAGE.map_of(502 * INCH, "base"), 0.0, "base")
    assert butt is not None
    assert (butt[0].label, butt[0].kind) == ("BUTT STA 500", "butt")
    frame = FUSELAGE.nearest_frame(652 * INCH, "base")
    assert frame is not None
    assert frame[0].label == "29"
    assert frame[1] == pytest.approx(8 * INCH)


def test_joints_are_where_the_panels_meet() -> None:
    laps = {j.label for j in FUSELAGE.joints if j.kind == "lap"}
    butts = {j.label for j in FUSELAGE.joints if j.kind == "butt"}
    assert laps == {f"LAP S-{n}{side}" for n in (5, 12, 18) for side in "LR"}
    assert butts == {f"BUTT STA {n}" for n in (300, 500, 700, 900)}


@pytest.mark.parametrize(
    ("station", "degrees", "zone"),
    [
        (200, -30, "211"),
        (200, 30, "212"),
        (640, 175, "132"),
        (640, -175, "131"),
        (1000, 10, "252"),
        # The floor line, WL 135, is 105.5 degrees from the crown at a radius of 56.
        (640, 105, "232"),
        (640, 106, "132"),
    ],
)
def test_zones_split_at_the_floor_and_the_centreline(
    station: float, degrees: float, zone: str
) -> None:
    map_mm = FUSELAGE.map_of(station * INCH, "base")
    found = GEOMETRY.zone_of_skin(FUSELAGE, map_mm, arc(degrees))
    assert found is not None
    assert found.code == zone


@pytest.mark.parametrize(
    ("section", "station", "zone"),
    [
        ("WING-L", 100, "510"), ("WING-R", 250, "620"), ("WING-R", 480, "630"),
        ("HT-L", 60, "331"), ("NAC-2", 60, "420"),
    ],
)  # fmt: skip
def test_zones_of_the_other_sections(section: str, station: float, zone: str) -> None:
    place = GEOMETRY.section(section)
    found = GEOMETRY.zone_of_skin(place, station * INCH, 100.0)
    assert found is not None
    assert found.code == zone


def test_the_wing_tapers_and_has_spars_and_stringers() -> None:
    wing = GEOMETRY.section("WING-R")
    assert wing.size_at(240 * INCH) == pytest.approx(77.5 * INCH)
    spars = {p.label: p.s_mm for p in wing.planes}
    assert spars["FRONT SPAR"] == pytest.approx(0.15 * 110 * INCH)
    assert spars["REAR SPAR"] == pytest.approx(0.62 * 110 * INCH)
    assert len(wing.frames) == 24
    assert wing.frames[13].label == "14"
    assert wing.frames[13].map_mm == pytest.approx(280 * INCH)
    assert len(wing.stringers) == 8


def test_fin_skins_lie_on_both_sides_of_its_leading_edge() -> None:
    fin: Section = GEOMETRY.section("FIN")
    left = fin.panel_at(50 * INCH, -0.3 * fin.reference_mm)
    right = fin.panel_at(50 * INCH, 0.3 * fin.reference_mm)
    assert left is not None
    assert right is not None
    assert (left.label, right.label) == ("LH 0-150", "RH 0-150")


def test_values_of_the_type_are_in_canonical_units() -> None:
    pressures = GEOMETRY.pressures
    assert pressures is not None
    # 1 psi = 6.894757 kPa (NIST SP 811, appendix B.8).
    assert pressures.normal_mpa == pytest.approx(8.2 * 6.894757e-3, rel=1e-6)
    assert pressures.relief_mpa > pressures.normal_mpa > pressures.suction_mpa
    assert FUSELAGE.frame_area_mm2 == pytest.approx(0.35 * 645.16)
    assert FUSELAGE.stringer_area_mm2 == pytest.approx(0.20 * 645.16)
    base, stretched = GEOMETRY.variant("base"), GEOMETRY.variant("S")
    assert (base.design_service_goal_fc, base.limit_of_validity_fc) == (30_000, 34_000)
    assert (base.limit_of_validity_fh, stretched.limit_of_validity_fh) == (32_000, None)
    assert stretched.limit_of_validity_fc == 60_000


def test_adopted_values_say_so() -> None:
    geometry: TypeGeometry = GEOMETRY
    rows = (
        *geometry.fatigue_policies, *geometry.detectable_sizes, *geometry.rogue_flaws
    )  # fmt: skip
    assert all("adopted demo value" in row.source for row in rows)
    policy = geometry.fatigue_policy("stress_life")
    assert policy is not None
    assert policy.multiplies
    hidden = geometry.detectable_size("eddy_current_high", "fastener head")
    assert hidden is not None
    assert hidden.hidden_mm == pytest.approx(0.1 * INCH)
    assert geometry.detectable_size("eddy_current_high", "nowhere") is None
