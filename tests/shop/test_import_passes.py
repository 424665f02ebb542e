"""Passes from a CSV file: each row's fate is shown before anything is written."""

import re
from html import unescape

import pytest
from django.core.files.uploadedfile import SimpleUploadedFile
from django.urls import reverse
from django_scopes import scope

from shop.people.models import LogEntry
from tests.shop.setups_world import make_issued, make_world, signed_in
from tests.shop.track_world import enter, make_weekend, passes_of

GOOD = "car,time,lane,revision,60 ft (s),330 ft,1320 ft,1320 ft mph\r\n"
ROWS = (
    "Marigold,14:05,left,1,1.312,3.610,8.671,157.02\r\n"
    "218,15:10,right,rev 1,1.305,3.598,8.660,157.30\r\n"
)


@pytest.fixture
def world(db):
    return make_world()


@pytest.fixture
def weekend(world):
    weekend = make_weekend(world, ends_on=make_weekend(world, "Elsewhere").starts_on)
    make_issued(world)
    return weekend


def upload(client, weekend, text, name="passes.csv", **more):
    data = text if isinstance(text, bytes) else text.encode()
    file = SimpleUploadedFile(name, data, content_type="text/csv")
    return client.post(reverse("track:import", args=[weekend.pk]), {"file": file, **more})


def confirm(client, weekend, preview, do="write"):
    """What a browser sends when the preview's button is pressed."""
    page = preview.content.decode()
    text = unescape(re.search(r"<textarea[^>]*>\n(.*?)</textarea>", page, re.DOTALL)[1]).replace("\r\n", "\n")
    fields = {
        "text": text.replace("\n", "\r\n"), "do": do, "file_name": "passes.csv",
        "seal": re.search(r'name="seal" value="([^"]*)"', page)[1],
    }
    return client.post(reverse("track:import", args=[weekend.pk]), fields)


def fates(response):
    page = response.content.decode()
    return re.findall(r'<tr class="fate-([\w-]+)">\s*<td class="number">(\d+)</td>', page)


def words(response):
    return unescape(response.content.decode())


def test_it_works(client, world, weekend):
    client = signed_in(client, world.owner)
    preview = upload(client, weekend, GOOD + ROWS)
    assert fates(preview) == [("new", "2"), ("new", "3")]
    assert passes_of(weekend) == [] and "Nothing is written yet" in words(preview)
    assert confirm(client, weekend, preview).url == reverse("track:weekend", args=[weekend.pk])
    first, second = passes_of(weekend)
    assert (str(first.time_60), first.lane, first.revision.number, str(first.speed_1320)) == ("1.3120", "left", 1, "157.02")
    assert (second.clock.hour, second.number) == (15, 2)
    with scope(shop=world.shop):
        assert LogEntry.objects.get(action="imported passes").detail == {
            "reason": "2 new, 0 filled in, from passes.csv",
        }


def test_a_team_mate_may(client, world, weekend):
    client = signed_in(client, world.mate)
    confirm(client, weekend, upload(client, weekend, GOOD + ROWS))
    assert len(passes_of(weekend)) == 2


def test_a_reader_may_not(client, world, weekend):
    client = signed_in(client, world.reader)
    assert client.get(reverse("track:import", args=[weekend.pk])).status_code == 200
    assert upload(client, weekend, GOOD + ROWS).status_code == 403


def test_a_stranger_does_not_find_it(client, world, weekend):
    client = signed_in(client, world.stranger)
    assert upload(client, weekend, GOOD + ROWS).status_code == 404
    assert client.get(reverse("track:download", args=[weekend.pk])).status_code == 404


def test_an_id_of_nothing(client, world):
    assert signed_in(client, world.owner).get("/weekends/987654/import").status_code == 404


def test_a_bad_row_is_refused_and_the_others_kept(client, world, weekend):
    bad = "Marigold,16:00,left,1,1.312,1.100,8.671,157.02\r\n"
    client = signed_in(client, world.owner)
    preview = upload(client, weekend, GOOD + ROWS + bad)
    assert fates(preview) == [("new", "2"), ("new", "3"), ("refused", "4")]
    assert "330 ft: 1.100 s to 330 ft cannot be: the car was already at 60 ft after 1.312 s" in words(preview)
    after = confirm(client, weekend, preview)
    assert len(passes_of(weekend)) == 2
    assert fates(after) == [("refused", "4")] and "1 row could not be read and stayed out" in words(after)
    # Nothing is lost: the refused row comes back as a file, with its reason.
    left = confirm(client, weekend, after, do="left-over").content.decode("utf-8-sig").splitlines()
    assert left[0] == GOOD.strip() + ",refused because"
    assert left[1].startswith(bad.strip()) and "cannot be" in left[1]


@pytest.mark.parametrize(("row", "said"), [
    ("Nobody,14:05,left,1,1.312,,,", "no car here is called “Nobody”"),
    (",14:05,left,1,1.312,,,", "no car; give its name or racing number"),
    ("218,14:05,left,9,1.312,,,", "has no issued revision “9”"),
    ("218,14:05,middle,1,1.312,,,", "lane: Select a valid choice"),
    ("218,14:05,left,1,fast,,,", "60 ft: “fast” is not a number"),
    ("218,14:05,left,1,nan,,,", "is not a finite number"),
    ("218,14:05,left,1,\"1,312\",,,", "write the decimal mark as a point"),
    ("218,14:05,left,1,,,,", "give the 60 ft or another time"),
    ("218,14:05,left,1,1.312", "5 fields where the header has 8"),
    ("218;14:05;left;1;1.312;;;", "this line is separated by semicolons, the header by commas"),
    ("218,14:05,left,1,1.312,,,157 km/h", "the speeds of one slip are in two units"),
])
def test_a_row_that_cannot_be_used_says_why(client, world, weekend, row, said):
    header = GOOD.replace("1320 ft mph", "1320 ft mph (mph),660 mph") if "km/h" in row else GOOD
    row += ",101" if "km/h" in row else ""
    preview = upload(signed_in(client, world.owner), weekend, header + row + "\r\n" + (ROWS if "km/h" not in row else ""))
    assert fates(preview)[0] == ("refused", "2") and said in words(preview)
    assert all(fate == "new" for fate, _ in fates(preview)[1:])


def test_what_is_already_here_is_a_duplicate(client, world, weekend):
    client = signed_in(client, world.owner)
    confirm(client, weekend, upload(client, weekend, GOOD + ROWS))
    again = upload(client, weekend, GOOD + ROWS + ROWS.splitlines()[0].replace("14:05", "18:00").replace("1.312", "1.299"))
    assert [fate for fate, _ in fates(again)] == ["duplicate", "duplicate", "new"]
    assert "the same as pass 1, entered before" in words(again)


def test_the_same_row_twice_in_a_file(client, world, weekend):
    preview = upload(signed_in(client, world.owner), weekend, GOOD + ROWS + ROWS)
    assert [fate for fate, _ in fates(preview)] == ["new", "new", "duplicate", "duplicate"]
    assert "the same as line 2" in words(preview)


def test_another_slip_for_a_time_already_taken(client, world, weekend):
    enter(world, weekend, time_60="1.40", clock="14:05")
    preview = upload(signed_in(client, world.owner), weekend, GOOD + ROWS)
    assert [fate for fate, _ in fates(preview)] == ["refused", "new"]
    assert "the time of day is that of pass 1, entered before, with other figures" in words(preview)


def test_a_row_that_knows_more_fills_in_what_is_missing(client, world, weekend):
    # Entered by phone two minutes after the slip was printed, 60 ft only.
    enter(world, weekend, time_60="1.312", clock="14:07", lane="right", temperature="84")
    client = signed_in(client, world.owner)
    rows = ROWS.replace(",left,", ",,")
    preview = upload(client, weekend, GOOD + rows)
    assert fates(preview) == [("fills-in", "2"), ("new", "3")]
    assert "adds to pass 1, entered before: 330 ft, 1320 ft, speed at 1320 ft, revision" in words(preview)
    confirm(client, weekend, preview)
    first, second = passes_of(weekend)
    assert (str(first.time_330), first.lane, first.revision.number, first.clock.minute) == ("3.6100", "right", 1, 7)
    assert (first.version, list(first.readings), second.number) == (2, ["temperature"], 2)
    assert [fate for fate, _ in fates(upload(client, weekend, GOOD + rows))] == ["duplicate", "duplicate"]


def test_two_rows_cannot_fill_in_the_same_pass(client, world, weekend):
    enter(world, weekend, time_60="1.312", clock="14:07")
    text = "car,time,60 ft,330 ft\r\n218,14:05,1.312,3.610\r\n218,14:06,1.312,3.611\r\n"
    preview = upload(signed_in(client, world.owner), weekend, text)
    assert [fate for fate, _ in fates(preview)] == ["fills-in", "refused"] and "line 2 fills in pass 1" in words(preview)


@pytest.mark.parametrize(("clock", "time", "fate"), [
    ("14:35", "1.312", "fills-in"),  # half an hour is the most
    ("14:36", "1.312", "new"),
    ("14:07", "1.313", "new"),
])
def test_another_pass_is_not_taken_for_the_same(client, world, weekend, clock, time, fate):
    enter(world, weekend, time_60=time, clock=clock)
    assert fates(upload(signed_in(client, world.owner), weekend, GOOD + ROWS))[0] == (fate, "2")


def test_what_would_come_out_of_order_together_is_refused(client, world, weekend):
    enter(world, weekend, time_330="3.300", clock="14:05")
    preview = upload(signed_in(client, world.owner), weekend, "car,time,60 ft\r\n218,14:05,3.312\r\n")
    assert fates(preview) == [("refused", "2")]
    assert "together with pass 1, entered before: 3.300 s to 330 ft cannot be" in words(preview)


def test_a_fate_that_changed_meanwhile_is_shown_again(client, world, weekend):
    client = signed_in(client, world.owner)
    preview = upload(client, weekend, GOOD + ROWS)
    enter(world, weekend, time_60="1.40", clock="14:05")
    response = confirm(client, weekend, preview)
    assert response.status_code == 409 and "Nothing has been written; look once more" in words(response)
    assert len(passes_of(weekend)) == 1


def test_semicolons_decimal_commas_and_a_mark_at_the_start(client, world, weekend):
    text = "car;time;60 ft;1320 ft;driver saw\r\n218;14:05;1,312;8,671;\"clean; straight, \"\"no\"\" shake\"\r\n"
    client = signed_in(client, world.owner)
    preview = upload(client, weekend, text.encode("utf-8-sig"))
    assert "read with a decimal comma" in words(preview)
    confirm(client, weekend, preview)
    run, = passes_of(weekend)
    assert (str(run.time_60), run.driver_saw) == ("1.3120", 'clean; straight, "no" shake')


def test_a_note_of_several_lines_and_a_row_after_it(client, world, weekend):
    text = 'car,60 ft,crew saw\r\n218,1.312,"left front up\r\nfor 20 ft"\r\n218,,\r\n'
    preview = upload(signed_in(client, world.owner), weekend, text)
    assert fates(preview) == [("new", "2"), ("refused", "4")]


def test_a_quote_that_is_never_closed_keeps_the_rows_before_it(client, world, weekend):
    preview = upload(signed_in(client, world.owner), weekend, GOOD + ROWS + '218,"15:00,left,1,1.3,,,\r\n')
    assert [fate for fate, _ in fates(preview)] == ["new", "new", "refused"]
    assert "a quote is opened and not closed" in words(preview)


def test_a_row_without_a_day_says_which_is_taken(client, world):
    two_days = make_weekend(world)
    preview = upload(signed_in(client, world.owner), two_days, "car,60 ft\r\n218,1.312\r\n")
    assert "no revision: not counted in comparisons. no day: taken as 10 May." in words(preview)


def test_units_in_the_header_count(client, world, weekend):
    client = signed_in(client, world.owner)
    text = "car,60 ft (ms),temperature (C),pressure (mbar),humidity (%)\r\n218,1312,29,979,41\r\n"
    confirm(client, weekend, upload(client, weekend, text))
    run, = passes_of(weekend)
    assert str(run.time_60) == "1.3120"
    assert [run.readings[key]["unit"] for key in ("temperature", "pressure", "humidity")] == ["°C", "hPa", "%"]


@pytest.mark.parametrize(("data", "said"), [
    (b"", "the submitted file is empty|choose a file first|the file is empty"),
    (b"   \r\n", "the file is empty"),
    (GOOD.encode(), "no rows under the header"),
    (b"a,b,c\r\n1,2,3\r\n", "no header is known here"),
    (b"car,60 ft (lb)\r\n218,1.3\r\n", "unit “lb” does not fit here; use s, ms"),
    (b"car,60 ft,60'\r\n218,1.3,1.3\r\n", "two columns hold the same thing"),
    (b"PK\x03\x04\x00\x00", "this is not a text file"),
    (b"car,60 ft\r\n" + b"218,1.3\r\n" * 2001, "more than 2000 rows"),
    (b"x" * (1024 * 1024 + 1), "at most 1 MB are read at once"),
])
def test_a_file_that_is_no_table_of_passes_is_refused_whole(client, world, weekend, data, said):
    response = upload(signed_in(client, world.owner), weekend, data)
    assert response.status_code == 422 and re.search(said, words(response))


def test_the_car_of_rows_that_name_none(client, world, weekend):
    client = signed_in(client, world.owner)
    assert fates(upload(client, weekend, "60 ft\r\n1.312\r\n", car=world.car.pk)) == [("new", "2")]
    assert upload(client, weekend, "60 ft\r\n1.312\r\n", car=make_world().car.pk).status_code == 404


def test_what_goes_out_comes_in_again_as_duplicates(client, world, weekend):
    client = signed_in(client, world.owner)
    confirm(client, weekend, upload(client, weekend, GOOD + ROWS))
    enter(world, weekend, time_60="1.4", aborted="on", abort_reason="=tyres shook, lifted", good_to="time_60",
          temperature="29 °C", left_rear_pressure="9 3/4", crew_saw='said "no"\nthen yes', speed_660="200.1",
          speed_unit="km/h", pressure="28.9", pressure_kind="altimeter")
    out = client.get(reverse("track:download", args=[weekend.pk]))
    text = out.content.decode("utf-8-sig")
    assert "'=tyres shook, lifted" in text and out["Content-Disposition"].endswith('.csv"')
    assert [fate for fate, _ in fates(upload(client, weekend, text))] == ["duplicate"] * 3
    # And on another weekend the same file makes the same passes.
    other = make_weekend(world, "Cedar Flats")
    confirm(client, other, upload(client, other, text))
    same = ("number", "clock", "lane", "time_60", "speed_1320", "speed_660", "speed_unit", "aborted", "abort_reason",
            "good_to", "readings", "pressure_kind", "revision")
    assert [[getattr(run, name) for name in same] for run in passes_of(other)] == [
        [getattr(run, name) for name in same] for run in passes_of(weekend)
    ]


def test_an_empty_file_names_every_column(client, world, weekend):
    text = signed_in(client, world.owner).get(reverse("track:blank", args=[weekend.pk])).content.decode("utf-8-sig")
    assert text.startswith("car,pass,day,time,lane,revision,aborted")
    assert "60 ft (s)" in text and "air pressure (inHg)" in text
