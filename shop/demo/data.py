"""The demo shop: invented people, cars and numbers, so that every screen has something true to show.

Everything is written as a person would type it. Nothing here is measured on a real car.
"""

from __future__ import annotations

from dataclasses import dataclass, field

SHOP = {"name": "Ravine Street Chassis", "units": "us", "paper": "letter", "address": "14 Ravine Street, Port Ellery"}
PASSWORD = "rosewood-four-link"  # noqa: S105  printed at every start: the demo is open to whoever has the address
MEMBERS = [
    ("demo@ravine-street.example", "Ines Calloway", "owner"),
    ("bench@ravine-street.example", "Piet Lindqvist-Moss", "technician"),
    ("counter@ravine-street.example", "Abel Tarrow", "reader"),
]
CUSTOMERS = {
    "Marisol Ketteridge": ("555-0142", "Brings the car on Tuesdays; likes the sheet on A4."),
    "Dov Hallam": ("555-0187", "Runs the index class; asks for one change at a time."),
    "Thessaly Brandt": ("555-0116", "Dragster; trailer parked behind bay 2."),
}


@dataclass(frozen=True)
class DemoRevision:
    """What a revision changes on its parent, and why."""

    reason: str
    holes: dict[str, int] = field(default_factory=dict)
    settings: dict[str, str] = field(default_factory=dict)


@dataclass(frozen=True)
class DemoCar:
    customer: str
    name: str
    racing_number: str
    race_class: str
    chassis: str
    linkage: str
    measured: dict[str, str]
    brackets: dict[str, tuple[str, str, str, str, int]]
    holes: dict[str, int]
    revisions: list[DemoRevision]
    units: str = "us"
    survey_notes: str = ""


def _four_link(lower_x: str, lower_z: tuple[str, str], upper_x: str, upper_z: tuple[str, str]) -> dict[str, tuple]:
    return {
        "lower_chassis": (lower_x, lower_z[0], lower_x, lower_z[1], 5),
        "lower_housing": ("0 1/2", "8 1/2", "0 1/2", "11 1/2", 4),
        "upper_chassis": (upper_x, upper_z[0], upper_x, upper_z[1], 5),
        "upper_housing": ("1", "17 1/2", "1", "20 1/2", 4),
    }


CARS = [
    DemoCar(
        customer="Marisol Ketteridge",
        name="Marigold",
        racing_number="218",
        race_class="open door-car eliminator",
        chassis="tube chassis, steel body, big block",
        linkage="four-link",
        measured={
            "wheelbase": "106",
            "front_tyre_radius": "13",
            "rear_tyre_radius": "16",
            "weight_lf": "738",
            "weight_rf": "716",
            "weight_lr": "689",
            "weight_rr": "707",
            "total_weight": "2850",
            "empty_lf": "688",
            "empty_rf": "702",
            "empty_lr": "610",
            "empty_rr": "671",
            "cg_height": "20 1/2",
            "front_unsprung_weight": "150",
            "rear_unsprung_weight": "350",
            "front_spring_rate": "115",
            "front_motion_ratio": "1",
            "front_shock_rate": "4",
            "front_pressure": "28",
            "rear_spring_rate": "165",
            "rear_shock_rate": "6",
            "rear_pressure": "11 1/2",
            "spring_chassis_x": "-4 1/2",
            "spring_chassis_z": "33",
            "spring_housing_x": "-5",
            "spring_housing_z": "13",
            "ride_height_front": "4",
            "ride_height_rear": "5 1/4",
            "front_droop_clearance": "4 1/2",
            "front_bump_clearance": "2 1/2",
            "rear_droop_clearance": "3 3/4",
            "rear_bump_clearance": "3",
            "wheelie_bar_x": "58",
            "wheelie_bar_clearance": "4",
        },
        brackets=_four_link("21", ("6", "10"), "18", ("11 1/2", "15 1/2")),
        holes={"lower_chassis": 3, "lower_housing": 3, "upper_chassis": 3, "upper_housing": 3},
        survey_notes="Scaled on the bay 1 pads, levelled; driver in, tank half full.",
        revisions=[
            DemoRevision("As it came in"),
            DemoRevision(
                "Upper bar up one hole at the chassis: front came up late and the tyres spun at 20 ft",
                {"upper_chassis": 2},
            ),
            DemoRevision(
                "Stiffer rear shock to slow the separation seen on the run",
                {},
                {"rear_shock_rate": "9", "rear_shock_rebound": "6"},
            ),
        ],
    ),
    DemoCar(
        customer="Dov Hallam",
        name="Night Heron",
        racing_number="77X",
        race_class="index, 10.5 wide tyre",
        chassis="factory floor, back-halved, small block",
        linkage="four-link",
        units="metric",
        measured={
            "wheelbase": "2690",
            "front_tyre_radius": "318",
            "rear_tyre_radius": "356",
            "weight_lf": "372",
            "weight_rf": "349",
            "weight_lr": "328",
            "weight_rr": "341",
            "cg_height": "530 mm",
            "front_unsprung_weight": "72",
            "rear_unsprung_weight": "168",
            "front_spring_rate": "24 N/mm",
            "front_motion_ratio": "0.72",
            "front_shock_rate": "0.95 N·s/mm",
            "rear_spring_rate": "30 N/mm",
            "rear_shock_rate": "1.1 N·s/mm",
            "rear_pressure": "85",
            "spring_chassis_x": "-105",
            "spring_chassis_z": "820",
            "spring_housing_x": "-130",
            "spring_housing_z": "320",
            "ride_height_front": "120",
            "ride_height_rear": "140",
            "front_droop_clearance": "90",
        },
        brackets={
            "lower_chassis": ("535", "190", "535", "290", 5),
            "lower_housing": ("12", "215", "12", "290", 4),
            "upper_chassis": ("460", "300", "460", "400", 5),
            "upper_housing": ("25", "440", "25", "515", 4),
        },
        holes={"lower_chassis": 3, "lower_housing": 3, "upper_chassis": 2, "upper_housing": 2},
        survey_notes="Unit of the tape: millimetres.",
        revisions=[
            DemoRevision("Baseline after the new housing"),
            DemoRevision(
                "Lower bar down one hole at the chassis, to pull the instant centre back", {"lower_chassis": 2}
            ),
        ],
    ),
    DemoCar(
        customer="Dov Hallam",
        name="Tin Lantern",
        racing_number="77",
        race_class="street, ladder bars",
        chassis="full frame, iron small block",
        linkage="ladder-bar",
        measured={
            "wheelbase": "110 1/4",
            "front_tyre_radius": "13 1/4",
            "rear_tyre_radius": "14 3/4",
            "weight_lf": "861",
            "weight_rf": "832",
            "weight_lr": "744",
            "weight_rr": "763",
            "cg_height": "22",
            "rear_unsprung_weight": "405",
            "front_spring_rate": "250",
            "front_motion_ratio": "0.65",
            "rear_spring_rate": "140",
            "rear_shock_rate": "5",
            "spring_chassis_x": "-6",
            "spring_chassis_z": "31 1/2",
            "spring_housing_x": "-6 1/2",
            "spring_housing_z": "12 1/4",
            "ride_height_front": "5 1/2",
            "ride_height_rear": "6",
        },
        brackets={"ladder_chassis": ("32", "9", "32", "12", 4)},
        holes={"ladder_chassis": 2},
        revisions=[
            DemoRevision("As driven in"),
            DemoRevision("Front of the bar up a hole: wants more hit on a slick surface", {"ladder_chassis": 3}),
        ],
    ),
    DemoCar(
        customer="Thessaly Brandt",
        name="Needle",
        racing_number="19",
        race_class="rear-engined dragster, sprung axle",
        chassis="225 in chassis, alloy small block",
        linkage="four-link",
        measured={
            "wheelbase": "225",
            "front_tyre_radius": "11",
            "rear_tyre_radius": "16 1/2",
            "weight_lf": "268",
            "weight_rf": "262",
            "weight_lr": "611",
            "weight_rr": "624",
            "cg_height": "19",
            "pitch_inertia": "24000 lb·ft²",
            "front_unsprung_weight": "60",
            "rear_unsprung_weight": "330",
            "front_spring_rate": "210",
            "front_motion_ratio": "0.8",
            "front_shock_rate": "5",
            "front_tyre_rate": "1500",
            "rear_spring_rate": "220",
            "rear_shock_rate": "8",
            "rear_pressure": "7",
            "spring_chassis_x": "-3",
            "spring_chassis_z": "31",
            "spring_housing_x": "-4",
            "spring_housing_z": "12 1/2",
        },
        brackets=_four_link("26", ("7", "11"), "24", ("13", "17")),
        holes={"lower_chassis": 2, "lower_housing": 2, "upper_chassis": 2, "upper_housing": 3},
        revisions=[
            DemoRevision("First survey; springs as delivered"),
            DemoRevision("Harder hit for the better surface", {}, {"hit_peak": "1.5 g", "hit_rise": "0.04"}),
            DemoRevision(
                "Softer rear springs: the tyre was unloaded after the first peak", {}, {"rear_spring_rate": "180"}
            ),
        ],
    ),
]

# Kind, name, numbers as typed, curve as CSV, where from.
PARTS = [
    *(
        ("spring", f"{rate} by 14, plain ends", {"rate": f"{rate} lb/in", "free_length": "14"}, "", "spring rater, bay 2")
        for rate in (110, 130, 150, 165, 180, 200)
    ),
    (
        "shock",
        "Rear, double adjustable, green body",
        {"stroke": "6 1/2", "closed_length": "11 1/4"},
        "side,click,velocity (in/s),force (lbf)\n"
        + "\n".join(
            f"{side},{click},{speed},{round(base * (1 + 0.12 * click) * speed**0.7)}"
            for side, base in (("compression", 14), ("rebound", 22))
            for click in (0, 4, 8, 12)
            for speed in (1, 3, 5, 10)
        ),
        "own dyno, invented for the demo",
    ),
    ("tyre", "Rear slick, 32 by 14", {"rate": "1250 lb/in", "pressure": "11", "radius": "16"}, "", "jack and scales"),
    (
        "tube",
        "1 1/4 by 0.095, alloy steel",
        {"outer_diameter": "1 1/4", "wall": "0.095", "yield_strength": "75", "modulus": "29000"},
        "",
        "mill certificate, invented for the demo",
    ),
    (
        "rod_end",
        "3/4-16, steel race",
        {"static_rating": "28000", "thread_diameter": "0.75", "threads_per_inch": "16"},
        "",
        "maker's sheet, invented for the demo",
    ),
]
