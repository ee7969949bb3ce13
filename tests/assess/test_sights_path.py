"""Cold, beads and paths: what is computed to be seen of them."""

from __future__ import annotations

from pathlib import Path

import pytest

from runbook.answers import ChargeBox, LineKind, PlanLine
from runbook.assess.plan_line import plan_line
from runbook.assess.sights import live_sights, path_sights
from runbook.assess.sights.frozen import letting_down, melting_sight, solid_sight
from runbook.assess.sights.marks import marks
from runbook.assess.walk import walk
from runbook.charge.isochore import Isochore
from tests.assess.looking import KELVIN, filled, kinds, number, of, seen, there
from tests.assess.scenes import scene

# -- cold ----------------------------------------------------------------------------------------------------


def test_solid_is_there_melts_and_goes(tmp_path: Path) -> None:
    """Below the triple point a share of the cell, at it gauge and thermometer stand still, above it liquid."""
    place = there(tmp_path)
    assert "melts at -56.6 °C" in of(seen(place, 200.0), "solid").words
    assert "stand still" in of(seen(place, place.substance.triple_temperature), "solid").words
    assert not [s for s in seen(place, 220.0) if s.of == "solid"]


@pytest.mark.wiring
@pytest.mark.parametrize("share", [0.0, 0.25, 0.5, 0.9, 1.0])
def test_the_fraction_left_on_the_plateau(tmp_path: Path, share: float) -> None:
    """With so much of the melting heat in, the rest of the solid is left (lever rule): 1e-9."""
    place = there(tmp_path)
    density = 480.0
    path = Isochore(place.substance, density)
    assert path.plateau is not None
    begin, end = path.plateau
    state = path.state_of_energy(begin + (1e-9 + share * (1.0 - 2e-9)) * (end - begin))
    found = solid_sight(place, state)
    assert found is not None
    assert number(found, "solid left, of what melts") == pytest.approx(1.0 - share, abs=2e-9)
    assert "shrinks" in found.words


@pytest.mark.wiring
def test_shares_at_the_ends_of_melting(tmp_path: Path) -> None:
    """480 kg/m3: 98.0 % of the mass is solid when it begins and 98.3 % liquid when it ends (Jaeger and Span 2012 with
    Span and Wagner 1996): 0.2 %."""
    place = there(tmp_path)
    found = melting_sight(place, 480.0)
    both = place.substance.saturation(place.substance.triple_temperature)
    assert number(found, "liquid at the end, of the volume") * both.liquid_density / 480.0 == pytest.approx(
        0.9828, rel=2e-3
    )
    solid = number(found, "solid at the beginning, of the volume")
    gas = (1.0 - solid) * both.vapour_density / 480.0
    assert 1.0 - gas == pytest.approx(0.9801, rel=2e-3)


def test_frost_below_the_ice_point_only(tmp_path: Path) -> None:
    """A wall at -1 degC grows it, at +1 degC it does not, whatever is inside."""
    place = there(tmp_path)
    assert of(seen(place, KELVIN - 1.0), "frost")
    assert not [s for s in seen(place, KELVIN + 1.0) if s.of == "frost"]


def test_snow_at_the_outlet(tmp_path: Path) -> None:
    """From 20 degC 3 % of the gas and 29 % of the liquid; colder gas gives none."""
    place = there(tmp_path)
    warm = of(letting_down(place, 293.15), "snow")
    assert number(warm, "snow from gas, of the mass") == pytest.approx(0.026, abs=0.002)
    assert number(warm, "snow from liquid, of the mass") == pytest.approx(0.291, abs=0.002)
    assert "Clear cold gas" in of(letting_down(place, 270.0), "snow").words


# -- beads ---------------------------------------------------------------------------------------------------


def test_beads_float_sink_and_rise(tmp_path: Path) -> None:
    """At 20 degC all float between 194 and 773 kg/m3; at 29.9 degC 0.62 has sunk and 0.30 has risen."""
    place = there(tmp_path, beads=True)
    cold = [s.words for s in seen(place, 293.15) if s.of == "beads"]
    assert all("floats on the surface" in words for words in cold)
    warm = " ".join(s.words for s in seen(place, 303.05) if s.of == "beads")
    assert "red bead K1 floats" in warm
    assert "blue bead K2 lies on the bottom" in warm
    assert "green bead K3 has risen" in warm


@pytest.mark.wiring
def test_beads_pass_where_the_phase_has_their_density(tmp_path: Path) -> None:
    """0.62 sinks where the liquid has 620 kg/m3, 0.30 rises where the vapour has 300 (301.66 K): 1 mK of the curve."""
    place = there(tmp_path, beads=True)
    by = {bead.tag: bead for bead in marks(place, 0.117).beads}
    sinks, rises = by["K2"].sinks_at, by["K3"].rises_at
    assert sinks is not None
    assert rises is not None
    assert place.substance.saturation(sinks).liquid_density == pytest.approx(620.0, abs=0.05)
    assert rises == pytest.approx(301.66, abs=0.01)


def test_a_bead_of_the_charges_density_hovers(tmp_path: Path) -> None:
    """Half a kelvin above critical 0.468 in 468 kg/m3 hovers, 0.45 rises and 0.62 sinks."""
    place = there(tmp_path, beads=True)
    words = " ".join(s.words for s in seen(place, place.substance.critical_temperature + 0.5) if s.of == "beads")
    assert "white bead K4 hovers" in words
    assert "red bead K1 rises" in words
    assert "blue bead K2 sinks" in words


# -- along a path --------------------------------------------------------------------------------------------


def test_from_dry_ice_to_the_room_in_order(tmp_path: Path) -> None:
    """Solid, melting at the triple point, gone, frost that melts, then the surface."""
    found = path_sights(there(tmp_path), 195.0, 294.15, 0.117)
    assert kinds(found) == ["solid", "solid", "solid gone", "frost", "meniscus"]
    assert [at for at, _ in found] == sorted(at for at, _ in found)
    assert found[1][0] == pytest.approx(216.592, abs=1e-3)


def test_the_lesson_in_order_and_back(tmp_path: Path) -> None:
    """Warmed: surface, haze, faint, gone. Cooled: the same temperatures the other way round, with rain."""
    place = there(tmp_path)
    up, down = path_sights(place, 294.15, 308.15, 0.117), path_sights(place, 308.15, 294.15, 0.117)
    assert kinds(up) == ["meniscus", "haze", "contrast", "meniscus", "haze", "meniscus"]
    assert kinds(down) == ["meniscus", "haze", "rain", "contrast", "haze", "meniscus"]
    between = [at for at, _ in up][1:-1]
    assert [at for at, _ in down][1:-1] == list(reversed(between))
    assert all(sight.at_K == at for at, sight in (*up, *down))


@pytest.mark.parametrize(("share", "edge"), [(1.3, "top"), (0.7, "bottom")])
def test_off_critical_it_leaves_the_window_then_the_cell(tmp_path: Path, share: float, edge: str) -> None:
    """The window's edge first, then full or dry; on cooling it comes back the other way round."""
    place = there(tmp_path)
    mass = filled(place, share)
    up = [s.words for _, s in path_sights(place, 294.15, 306.15, mass) if s.of == "meniscus"][1:3]
    assert f"leaves the window at the {edge}" in up[0]
    assert ("liquid fills" if edge == "top" else "last liquid") in up[1]
    back = [s.words for _, s in path_sights(place, 306.15, 294.15, mass) if s.of in ("rain", "meniscus")][1:3]
    assert ("from the top" if edge == "top" else "at the bottom") in back[0]
    assert f"comes into the window at the {edge}" in back[1]


def planned(folder: Path) -> list[PlanLine]:
    """Lines of the shipped procedure whose path shows something."""
    place = there(folder)
    lines = walk(place)
    return [plan_line(place, lines, i) for i, w in enumerate(lines) if w.verb is not None]


def test_warm_and_cool_lines_carry_their_path(tmp_path: Path) -> None:
    """The lesson's warming says with what and when the class sees it, the author's own words first."""
    found = [one for one in planned(tmp_path) if any(s.at_K is not None for s in one.sights)]
    assert [one.number for one in found] == ["1.18", "3.4", "3.6"]
    assert all(one.kind is LineKind.DO for one in found)
    lesson = found[1].sights
    assert not lesson[0].computed
    temperatures = [s.at_K for s in lesson if s.at_K is not None]
    assert temperatures == sorted(temperatures)
    assert any("fades and is gone" in s.words for s in lesson[1:])


def test_what_the_author_asks_for_stands_first(tmp_path: Path) -> None:
    """Of what is seen as the vessel stands, the sight asked for leads; the others stay, in their order."""
    orders = {}
    for name in ("meniscus", "haze"):
        place = scene(tmp_path, {"show: [meniscus, haze]": f"show: [{name}]"})
        line = next(one for one in walk(place) if one.number == "3.4")
        box = ChargeBox(0.1165, 0.1175, True, ("weighing",))
        orders[name] = [s.of for s in live_sights(place, line, line.during, box, 303.6)]
    assert {"meniscus", "haze"} <= set(orders["haze"])
    assert (orders["meniscus"][0], orders["haze"][0]) == ("meniscus", "haze")
    assert sorted(orders["haze"]) == sorted(orders["meniscus"])
