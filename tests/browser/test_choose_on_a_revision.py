"""Writing a revision in a real browser: every choice redraws, faults stand beside fields, nothing typed is lost."""

import pytest
from django.urls import reverse
from django_scopes import scope
from playwright.sync_api import Page, expect

from shop.setups.models import Revision
from tests.shop.setups_world import World, make_issued, make_world


@pytest.fixture
def world(transactional_db):
    return make_world()


@pytest.fixture
def form(world: World, page: Page, sign_in) -> Page:
    make_issued(world)
    sign_in(page, world.owner.user)
    page.goto(reverse("setups:new", args=[world.car.pk]))
    return page


def figure(page: Page, label: str):
    return page.locator("dl.headline div", has_text=label).locator("dd")


def test_a_hole_on_the_drawing_is_the_same_as_in_the_form(form: Page):
    before = figure(form, "Anti-squat, whole car").inner_text()
    form.locator('.pick[data-bracket="upper_chassis"][data-hole="2"]').click()
    expect(form.locator('input[name="upper_chassis"][value="2"]')).to_be_checked()
    expect(figure(form, "Anti-squat, whole car")).not_to_have_text(before)
    expect(form.locator("#beside-upper_chassis")).to_contain_text("rev 1: hole 3")
    expect(figure(form, "Upper bars")).to_contain_text("in")


def test_a_hole_can_be_chosen_by_keyboard(form: Page):
    form.locator('.pick[data-bracket="lower_chassis"][data-hole="4"]').focus()
    form.keyboard.press("Enter")
    expect(form.locator("#beside-lower_chassis")).to_contain_text("rev 1: hole 3")
    expect(form.locator('.pick[data-bracket="lower_chassis"][data-hole="4"]')).to_be_focused()


def test_a_fault_stands_beside_its_field_while_the_rest_is_drawn(form: Page):
    before = figure(form, "Anti-squat, whole car").inner_text()
    form.locator("#id_rear_spring_rate").fill("165 psi")
    expect(form.locator("#beside-rear_spring_rate")).to_contain_text("“psi” does not fit here")
    expect(figure(form, "Anti-squat, whole car")).to_have_text(before)
    expect(form.locator("#form-faults")).to_contain_text("still stand on rev 1")
    form.locator("#id_rear_spring_rate").fill("170")
    expect(form.locator("#beside-rear_spring_rate")).to_contain_text("rev 1: 165 lb/in")
    expect(form.locator("#form-faults")).to_be_empty()


def test_the_hit_is_typed_as_a_table(form: Page):
    assert form.get_by_label("Force at the tyres over time").is_hidden()
    form.get_by_label("table of force over time").check()
    form.get_by_label("Force at the tyres over time").fill("0 0\n0.05 3,000")
    expect(form.locator("#preview")).to_contain_text("3,000 lbf")
    assert form.locator("#id_hit_peak").is_hidden()


def test_what_was_typed_survives_leaving_the_page(form: Page):
    form.on("dialog", lambda dialog: dialog.accept())
    form.locator("#id_rear_pressure").fill("12 1/4")
    expect(form.locator("#beside-rear_pressure")).to_contain_text("rev 1: 11 1/2 psi")
    form.goto("/cars/")
    form.go_back()
    expect(form.locator("#id_rear_pressure")).to_have_value("12 1/4")
    expect(form.locator("#beside-rear_pressure")).to_contain_text("rev 1: 11 1/2 psi")


def test_keep_then_issue(form: Page, world: World, complaints):
    form.locator("#id_rear_pressure").fill("12 1/4")
    form.get_by_role("button", name="Keep as a draft").click()
    expect(form.get_by_role("status").first).to_contain_text("Nothing is issued yet")
    expect(form.locator("#id_rear_pressure")).to_have_value("12 1/4")
    complaints.expect("status of 422")
    form.get_by_role("button", name="Issue as rev 2").click()
    expect(form.locator("#beside-reason")).to_contain_text("say what this revision changes, and why")
    form.get_by_label("What this changes, and why").fill("More pressure: the sidewall rolled")
    form.get_by_role("button", name="Issue as rev 2").click()
    expect(form.get_by_role("heading", level=1)).to_contain_text("rev 2")
    with scope(shop=world.shop):
        assert Revision.objects.get(number=2).settings["rear_pressure"]["typed"] == "12 1/4"
