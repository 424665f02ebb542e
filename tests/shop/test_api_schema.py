"""Whatever is sent to the API within its schema, or just outside, gets an answer and never a fault of the program."""

import pytest
import schemathesis
from django.core.signals import request_finished, request_started
from django.db import close_old_connections
from django_scopes import scope
from hypothesis import HealthCheck, given, settings
from schemathesis.checks import not_a_server_error

from shop.config.wsgi import application
from shop.people.models import AccessToken
from tests.shop.setups_world import make_issued, make_world


@pytest.fixture
def one_connection(db):
    """The test's own transaction serves every request: Django would close its connection after each."""
    for signal in (request_started, request_finished):
        signal.disconnect(close_old_connections)
    yield
    for signal in (request_started, request_finished):
        signal.connect(close_old_connections)


@pytest.fixture
def described(one_connection):
    world = make_world()
    make_issued(world)
    with scope(shop=world.shop):
        _, key = AccessToken.issue(world.owner, "fuzz")
    headers = {"Authorization": f"Token {key}", "Accept": "application/vnd.oai.openapi+json, application/json"}
    found = schemathesis.openapi.from_wsgi("/api/v1/schema", application, headers=headers)
    found.config.update(headers=headers)
    return found


def test_nothing_sent_is_a_fault_of_the_program(described):
    asked = 0
    for operation in (found.ok() for found in described.get_all_operations()):

        @settings(max_examples=12, deadline=None, derandomize=True, suppress_health_check=list(HealthCheck))
        @given(case=operation.as_strategy())
        def answered(case):
            case.call_and_validate(checks=[not_a_server_error])

        answered()
        asked += 1
    assert asked > 15
