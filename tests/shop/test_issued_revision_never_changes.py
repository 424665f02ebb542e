"""The database itself refuses to change an issued revision, whichever code asks."""

import pytest
from django.db import IntegrityError, connection, transaction
from django.db.models import ProtectedError
from django_scopes import scope

from shop.setups.models import Revision
from tests.shop.setups_world import make_draft, make_issued, make_world


@pytest.fixture
def world(db):
    return make_world()


@pytest.mark.parametrize("column", ["reason", "notes", "settings", "holes", "car_file", "number", "version", "survey_id"])
def test_no_column_of_it_can_be_updated(world, column):
    issued = make_issued(world)
    with (
        pytest.raises(IntegrityError, match="an issued revision never changes"),
        transaction.atomic(),
        connection.cursor() as cursor,
    ):
        cursor.execute(f"UPDATE setups_revision SET {column} = {column} WHERE id = %s", [issued.pk])  # noqa: S608


def test_saving_it_through_the_models_is_refused_too(world):
    issued = make_issued(world)
    issued.notes = "one more thing"
    with scope(shop=world.shop):
        with pytest.raises(IntegrityError, match="never changes"), transaction.atomic():
            issued.save()
        with pytest.raises(IntegrityError, match="never changes"), transaction.atomic():
            Revision.objects.filter(pk=issued.pk).update(number=None, issued_at=None, car_file=None)
        assert Revision.objects.get(pk=issued.pk).notes == ""


def test_it_cannot_be_deleted(world):
    issued = make_issued(world)
    with scope(shop=world.shop):
        with pytest.raises(ProtectedError):
            issued.delete()
        with pytest.raises(ProtectedError):
            Revision.objects.filter(pk=issued.pk).delete()
    with pytest.raises(IntegrityError), transaction.atomic(), connection.cursor() as cursor:
        cursor.execute("DELETE FROM setups_revision WHERE id = %s", [issued.pk])
        connection.check_constraints()


def test_a_draft_can_be_changed(world):
    draft = make_draft(world)
    with scope(shop=world.shop):
        Revision.objects.filter(pk=draft.pk).update(notes="checked the pins")
        assert Revision.objects.get(pk=draft.pk).notes == "checked the pins"


def test_an_issued_row_must_be_whole(world):
    draft = make_draft(world)
    with scope(shop=world.shop), pytest.raises(IntegrityError), transaction.atomic():
        Revision.objects.filter(pk=draft.pk).update(number=1)
