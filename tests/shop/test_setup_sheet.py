"""The setup sheet of an issued revision: what is to be set, what changed, what it means."""

import re

import pytest
from django.urls import reverse

from tests.shop.launch_world import make_job, make_solved, set_row
from tests.shop.setups_world import make_draft, make_issued, make_world, signed_in


@pytest.fixture
def world(db):
    return make_world()


def url(revision):
    return reverse("sheets:sheet", args=[revision.pk])


def sheet_of(client, member, revision, query=""):
    response = signed_in(client, member).get(url(revision) + query)
    assert response.status_code == 200
    return response.content.decode()


def rows(page):
    """(label, value, what it was) of each line to set, tags left out."""
    found = re.findall(r"<tr[^>]*><th[^>]*>(.*?)</th><td class=\"number\">(.*?)</td><td class=\"was\">(.*?)</td></tr>", page)
    return {re.sub(r"<[^>]*>|△", "", label).strip(): (value, was) for label, value, was in found}


def test_it_works(client, world):
    first = make_solved(world, reason="As it came in")
    typed = {"upper_chassis": 2, "rear_shock_rate": "9", "rear_shock_rebound": "6", "notes": "Torque the jam nuts."}
    job = make_solved(world, first.revision, reason="Upper bar up one: it spun", **typed)
    page = sheet_of(client, world.owner, job.revision)
    lines = rows(page)
    assert lines["Upper link, chassis bracket"] == ("hole 2", "was hole 3")
    assert lines["Lower link, chassis bracket"] == ("hole 3", "")
    assert lines["Rear shock damping, each"] == ("9 lb·s/in", "was 6 lb·s/in")
    assert lines["Rear shock rebound setting"] == ("6 clicks", "newly set")
    assert re.fullmatch(r"0\.\d{3} in longer", lines["Upper bars"][1]) and lines["Lower bars"][1] == ""
    assert page.count('<tr class="changed">') == page.count('aria-label="changed"') == 4
    assert "changed since rev 1 (4)" in page
    for words in ("As it came in", "Upper bar up one: it spun", "Torque the jam nuts.", world.owner.user.name, "738.0 lb",
                  "Anti-squat, whole car", "Anti-squat, sprung mass", "stay down", "Set on the car by", "1/1"):
        assert words in page
    assert f"{job.result.figures['peak_rear_load'] / 4.4482216152605:,.0f} lbf" in page
    assert page.count("<svg") == 2  # the drawing and the code
    assert "style=" not in page


def test_the_first_has_nothing_to_differ_from(client, world):
    page = sheet_of(client, world.owner, make_solved(world).revision)
    assert "First setup of this car" in page and 'class="changed"' not in page


def test_it_carries_the_cautions(client, world):
    page = sheet_of(client, world.owner, make_issued(world))
    for words in ("rulebook in force", "qualified fabricator", "only on stands", "turn over or come down hard"):
        assert words in page


def test_it_marks_what_nobody_measured(client, world):
    page = sheet_of(client, world.owner, make_issued(world))
    assert "Typical, nobody measured it" in page and "Pitch inertia of the sprung mass" in page


@pytest.mark.parametrize(
    ("state", "words"),
    [("waiting", "not solved yet"), ("failed", "the linkage locks"), ("cancelled", "was cancelled")],
)
def test_without_a_solved_launch_it_says_so(client, world, state, words):
    job = make_job(world)
    set_row(job, state=state, error="the linkage locks at 0.120 s")
    page = sheet_of(client, world.owner, job.revision)
    assert words in page and "Peak rear load" not in page and "Anti-squat, whole car" in page


def test_it_says_when_the_front_lifts(client, world):
    flat = make_solved(world)
    assert "lifts the front tyres in the model" not in sheet_of(client, world.owner, flat.revision)
    lifted = make_solved(world, flat.revision, reason="Harder", hit_peak="1.4")
    assert "lifts the front tyres in the model" in sheet_of(client, world.owner, lifted.revision)


def test_a_ladder_bar_car_says_where_its_one_bar_goes(client, db):
    world = make_world("Tin Lantern")
    lines = rows(sheet_of(client, world.owner, make_issued(world)))
    assert lines["Ladder bar, chassis bracket"][0].startswith("hole ")
    assert any(label.startswith("Ladder bar, chassis pin to axle") for label in lines)


def test_an_older_revision_does_not_tell_of_newer_ones(client, world):
    first = make_issued(world, reason="As it came in")
    make_issued(world, first, "Made later", upper_chassis=2)
    page = sheet_of(client, world.owner, first)
    assert "As it came in" in page and "Made later" not in page


def test_it_keeps_to_the_last_six_revisions(client, world):
    revision = None
    for number in range(1, 9):
        revision = make_issued(world, revision, f"Reason {number} of this car", rear_spring_rate=str(150 + number))
    page = sheet_of(client, world.owner, revision)
    history = page[page.index('class="history"'):]
    assert "Reason 3 of this car" in history and "Reason 2 of this car" not in history and "2 earlier" in history


@pytest.mark.parametrize(("asked", "given"), [("", "letter"), ("?paper=a4", "a4"), ("?paper=napkin", "letter")])
def test_the_paper(client, world, asked, given):
    page = sheet_of(client, world.owner, make_issued(world), asked)
    assert f"paper-{given}" in page and f'class="sheet {given}"' in page


def test_the_shops_own_paper(client, world):
    world.shop.paper = "a4"
    world.shop.save()
    assert "paper-a4" in sheet_of(client, world.owner, make_issued(world))


def test_a_draft_has_no_sheet(client, world):
    draft = make_draft(world)
    assert signed_in(client, world.owner).get(url(draft)).url == reverse("setups:edit", args=[draft.pk])


def test_a_team_mate_and_a_reader_may(client, world):
    issued = make_issued(world)
    links = reverse("sheets:links", args=[issued.pk])
    assert links in sheet_of(client, world.mate, issued)
    assert links not in sheet_of(client, world.reader, issued)


def test_a_stranger_does_not_find_it(client, world):
    assert signed_in(client, world.stranger).get(url(make_issued(world))).status_code == 404


@pytest.mark.parametrize("path", ["/revisions/987654/sheet", "/revisions/seven/sheet"])
def test_an_id_of_nothing_or_malformed(client, world, path):
    assert signed_in(client, world.owner).get(path).status_code == 404


def test_post_is_refused(client, world):
    assert signed_in(client, world.owner).post(url(make_issued(world))).status_code == 405


def test_names_are_words_and_never_markup(client, world):
    issued = make_issued(world, reason="<script>alert(1)</script> & more", notes="<b>bold</b>")
    page = sheet_of(client, world.owner, issued)
    assert "<script>alert" not in page and "<b>bold</b>" not in page and "&lt;script&gt;" in page
