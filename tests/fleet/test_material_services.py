"""Loading materials and adopting demonstration values."""

from __future__ import annotations

import pytest
from django.core.exceptions import ValidationError

from fleet.models import HistoryEntry, Material, MaterialProperty
from fleet.services.materials import demo_values_load, materials_load
from tests.factories import FIXTURES, NOW, TODAY, operator_make, user_make

pytestmark = pytest.mark.django_db
FILE = FIXTURES / "materials.toml"


def test_the_file_again_changes_nothing():
    assert materials_load(path=FILE, actor=None, at=NOW) == Material.objects.count()
    before = HistoryEntry.objects.count()
    rows = MaterialProperty.objects.count()
    assert materials_load(path=FILE, actor=None, at=NOW) == 0
    assert MaterialProperty.objects.count() == rows
    assert HistoryEntry.objects.count() == before


def test_a_changed_material_is_its_next_revision(tmp_path):
    materials_load(path=FILE, actor=None, at=NOW)
    other = tmp_path / "materials.toml"
    text = FILE.read_text("utf-8").replace("value = 64\n", "value = 63.5\n", 1)
    other.write_text(text, "utf-8")
    assert materials_load(path=other, actor=None, at=NOW) == 1
    old, new = Material.objects.filter(name="2024", temper="T3", form="bare sheet")
    assert (old.revision, new.revision, new.replaces_id) == (1, 2, old.pk)
    assert old.properties.count() == new.properties.count()


def test_demo_values_are_adopted_once_by_two_people():
    materials_load(path=FILE, actor=None, at=NOW)
    operator = operator_make()
    one, two = (user_make(operator, role).person for role in ("engineer", "signatory"))
    asked = {
        "path": FILE, "operator": operator, "person": one, "second_person": two,
        "on": TODAY, "actor": None, "at": NOW,
    }  # fmt: skip
    assert demo_values_load(**asked) == 4
    assert demo_values_load(**asked) == 0
    value = operator.adopted_values.get(material__form="clad sheet")
    assert value.quantity == "fracture_toughness_mpa_root_mm"
    assert value.unit == "MPa*sqrt(mm)"


def test_a_file_that_is_not_there_or_wrong_is_refused(tmp_path):
    with pytest.raises(ValidationError, match="no materials file"):
        materials_load(path=tmp_path / "none.toml", actor=None, at=NOW)
    wrong = tmp_path / "wrong.toml"
    wrong.write_text("format = 7", "utf-8")
    with pytest.raises(ValidationError, match="format 7"):
        materials_load(path=wrong, actor=None, at=NOW)
    assert not Material.objects.exists()
