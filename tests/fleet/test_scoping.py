"""Every table belongs to an operator, or is shared for a reason named here."""

from __future__ import annotations

import pytest
from django.apps import apps
from django.conf import settings

from fleet.models import Operator, User
from fleet.scoping import ScopedQuerySet
from fleet.services.people import membership_end
from tests import factories

pytestmark = pytest.mark.django_db

TYPE = "an aircraft type and its geometry are read by every operator of the type"
MATERIAL = "published numbers belong to nobody"
PEOPLE = "companies and persons are named in the records of several operators"
HISTORY = "the chain is one for all; entries carry the operator"
SHARED = {
    "fleet_aircrafttype": TYPE,
    "fleet_variant": TYPE,
    "fleet_configuration": TYPE,
    "fleet_geometryrevision": TYPE,
    "fleet_section": TYPE,
    "fleet_frame": TYPE,
    "fleet_framestation": TYPE,
    "fleet_stringer": TYPE,
    "fleet_zone": TYPE,
    "fleet_cutout": TYPE,
    "fleet_joint": TYPE,
    "fleet_panel": TYPE,
    "fleet_fatiguepolicy": TYPE,
    "fleet_detectablesize": TYPE,
    "fleet_material": MATERIAL,
    "fleet_materialproperty": MATERIAL,
    "fleet_spectrum": MATERIAL,
    "fleet_organisation": PEOPLE,
    "fleet_person": PEOPLE,
    "fleet_user": PEOPLE,
    "fleet_historyhead": HISTORY,
    "fleet_historyitem": HISTORY,
    "fleet_historyseal": HISTORY,
    "fleet_recordnumber": "a counter that only the program reads",
    "fleet_backup": "a copy holds the records of all",
    "fleet_sentform": "found by its key only",
}
MODELS = [
    model
    for app in settings.RECORDED_APPS
    for model in apps.get_app_config(app).get_models()
]
SCOPED = [model for model in MODELS if hasattr(model, "operator_paths")]


def reached(model, path):
    """The model at the end of a look-up."""
    for name in path.split("__"):
        field = model._meta.pk if name == "pk" else model._meta.get_field(name)
        model = field.related_model or model
    return model


def test_every_table_is_scoped_or_shared_for_a_reason():
    unscoped = {m._meta.db_table for m in MODELS if m not in SCOPED}
    assert unscoped == set(SHARED)


@pytest.mark.parametrize("model", SCOPED, ids=lambda model: model._meta.db_table)
def test_its_look_ups_end_at_an_operator(model):
    assert {reached(model, path) for path in model.operator_paths} == {Operator}
    assert isinstance(model.objects.all(), ScopedQuerySet)


@pytest.mark.parametrize("model", SCOPED, ids=lambda model: model._meta.db_table)
def test_who_belongs_to_no_operator_asks_the_database_for_nothing_of_one(model):
    user = factories.user_make(factories.operator_make(), "engineer")
    user.memberships.all().delete()
    assert not model.objects.visible_to(user).exists()


def test_a_role_that_ended_opens_nothing(now):

    operator = factories.operator_make()
    user = factories.user_make(operator, "engineer")
    assert list(Operator.objects.visible_to(user)) == [operator]
    membership = user.memberships.get()
    membership_end(membership=membership, ended_on=factories.TODAY, at=now, actor=None)
    assert not Operator.objects.visible_to(User.objects.get(pk=user.pk)).exists()
