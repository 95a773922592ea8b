"""What the panel under a place says: thickness, loads, cycle, cladding, material."""

from __future__ import annotations

from fleet.models import Material, Operator, Panel, PanelOnAircraft
from fleet.selectors.kept import of_the_fleet
from repairs.analysis.types import Sourced, Stated
from repairs.services.evaluation_gathered import Gathered, UsedRow
from repairs.services.evaluation_materials import Given, material_inputs
from repairs.services.evaluation_place import Skin, Subject
from repairs.services.evaluation_spectrum import spectrum_inputs

THROUGH = ("crack", "hole")
"""Damage through the skin, whatever was blended off it before."""


def skin_inputs(
    found: Gathered, subject: Subject, skin: Skin, operator: Operator
) -> None:
    panel, fitted = skin.panel, skin.fitted
    rows: tuple[UsedRow, ...] = (panel, *((fitted,) if fitted else ()))
    source = f"panel {panel.label}: {panel.source}"
    found.word("pressurised", "yes" if panel.pressurised else "no", source, panel)
    found.word("load_kind", panel.load_kind, panel.load_source or source, panel)
    found.number("thickness", skin.thickness_mm, skin.thickness_source, *rows)
    found.number("radius", panel.radius_mm, source, panel)
    found.number("panel_length", skin.length_across_crack_mm, source, panel)
    found.number("panel_width", skin.width_mm, source, panel)
    loads = panel.load_source or source
    found.number("ultimate_running_load", panel.ultimate_load_n_per_mm, loads, panel)
    found.number("limit_longitudinal_stress", panel.limit_stress_mpa, loads, panel)
    found.number("mean_longitudinal_stress", panel.mean_stress_mpa, loads, panel)
    if not panel.pressurised and panel.section.wrap_mm is None:
        found.number("limit_flight_stress", panel.limit_stress_mpa, loads, panel)
    if panel.spectrum_id is not None:
        spectrum_inputs(found, panel.spectrum_id)
    material = fitted.material if fitted and fitted.material else panel.material
    _clad(found, panel, fitted, material)
    if material is not None and skin.thickness_mm is not None:
        for name, value, used in _of_material(material, operator, skin.thickness_mm):
            found.put(name, value, material, used)


def less_blended(found: Gathered) -> None:
    """Take what earlier blends took off the skin that a crack or hole goes through.

    Where the depth of one is not recorded, the thickness is not known either.
    """
    damage, thickness = found.values.get("damage_type"), found.values.get("thickness")
    through = isinstance(damage, Stated) and damage.value in THROUGH
    if not through or not isinstance(thickness, Sourced):
        return
    depth = found.values.get("earlier_depth")
    if not isinstance(depth, Sourced):
        del found.values["thickness"]
    elif depth.value > 0:
        source = f"{thickness.source}; less {depth.value:.2f} mm: {depth.source}"
        found.number("thickness", thickness.value - depth.value, source)


@of_the_fleet
def _of_material(
    material: Material, operator: Operator, thickness_mm: float
) -> list[Given]:
    return list(material_inputs(material, operator, thickness_mm))


def _clad(
    found: Gathered,
    panel: Panel,
    fitted: PanelOnAircraft | None,
    material: Material | None,
) -> None:
    """Whether the skin is clad; a fitted panel's own cladding is not on the type's."""
    source = f"panel {panel.label}: {panel.source}"
    if fitted is not None and fitted.material is not None:
        clad = "yes" if "clad" in fitted.material.form else "no"
        found.word("clad", clad, fitted.source, fitted)
    elif panel.clad_mm is not None:
        found.word("clad", "yes" if panel.clad_mm > 0 else "no", source, panel)
        found.number("clad_thickness", panel.clad_mm, source, panel)
    elif material is not None:
        found.word("clad", "yes" if "clad" in material.form else "no", source, panel)
