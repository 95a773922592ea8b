"""R19: level 2 and 3 corrosion is not closed without a recorded programme action; level
3 needs a fleet action.

Corrosion prevention and control programmes, AMC 20-20A appendix 4; FAA AD 90-25-07:
after a level 2 the programme is corrected, after a level 3 the affected area of the
operator's other aircraft is inspected.
"""

from __future__ import annotations

import pytest
from django.core.exceptions import ValidationError

from repairs.models import CorrosionLevel
from repairs.services.reports import Reportability
from tests.finding_rows import CORROSION, close, levelled, rectified

pytestmark = pytest.mark.django_db
PROGRAMME = {"programme_action": "repeat of C-53-120 halved, amendment 31"}
FLEET = {"fleet_action": "I-0004 asks the sisters"}


@pytest.fixture
def corroded(world):
    return rectified(world, damage_type="corrosion", typed=CORROSION)


def closed(world, finding):
    answer = Reportability(False, "reworked within limits")
    return close(world, finding, report=answer, cause="corrosion").state


def test_corrosion_whose_level_nobody_determined_is_not_closed(world, corroded):
    with pytest.raises(ValidationError, match="Determine the corrosion level"):
        closed(world, corroded)


def test_level_1_is_closed_without_an_action(world, corroded):
    levelled(world, corroded, 1)
    assert closed(world, corroded) == "closed"


def test_level_2_is_not_closed_without_a_programme_action(world, corroded):
    levelled(world, corroded, 2, **FLEET)
    with pytest.raises(ValidationError, match="is level 2 corrosion: record what is"):
        closed(world, corroded)
    levelled(world, corroded, 2, **PROGRAMME)
    assert closed(world, corroded) == "closed"


def test_level_3_needs_both_the_programme_and_the_fleet(world, corroded):
    levelled(world, corroded, 3, **PROGRAMME)
    with pytest.raises(ValidationError, match="on the other aircraft of the fleet"):
        closed(world, corroded)
    levelled(world, corroded, 3, **FLEET)
    with pytest.raises(ValidationError, match="changed in the corrosion programme"):
        closed(world, corroded)
    levelled(world, corroded, 3, **PROGRAMME, **FLEET)
    assert closed(world, corroded) == "closed"


def test_a_blank_action_is_none(world, corroded):
    levelled(world, corroded, 2, programme_action="  ")
    with pytest.raises(ValidationError, match="level 2 corrosion"):
        closed(world, corroded)


def test_a_correction_replaces_the_level_and_leaves_it_on_record(world, corroded):
    first = levelled(world, corroded, 2)
    second = levelled(world, corroded, 1)
    assert second.replaces == first
    assert CorrosionLevel.objects.count() == 2
    assert closed(world, corroded) == "closed"
