"""The geometry of an aircraft type, rebuilt from the text of its file.

Everything is in mm and MPa; the file is written in the type's own units. fixtures/
README.md documents the file.
"""

from __future__ import annotations

from fleet.location.geometry_file import (
    GeometryFileError,
    geometry_from_toml,
)
from fleet.location.parts import (
    Box,
    Cutout,
    Frame,
    Joint,
    Panel,
    PanelMaterial,
    Plane,
    Plug,
    Stringer,
    Variant,
)
from fleet.location.sections import Section
from fleet.location.typegeometry import (
    DetectableSize,
    Detection,
    FatiguePolicy,
    Pressures,
    RogueFlaw,
    Spectrum,
    TypeGeometry,
    Zone,
)

__all__ = [
    "Box",
    "Cutout",
    "DetectableSize",
    "Detection",
    "FatiguePolicy",
    "Frame",
    "GeometryFileError",
    "Joint",
    "Panel",
    "PanelMaterial",
    "Plane",
    "Plug",
    "Pressures",
    "RogueFlaw",
    "Section",
    "Spectrum",
    "Stringer",
    "TypeGeometry",
    "Variant",
    "Zone",
    "geometry_from_toml",
]
