"""Compile or load the kernel before anyone waits for it."""

from __future__ import annotations

EXAMPLE = {
    "format": "launch-ledger/car",
    "version": 1,
    "name": "warm-up",
    "wheelbase": 2.7,
    "mass": 1200.0,
    "cg": {"x": 1.3, "z": 0.52},
    "chassis": {"pitch_inertia": 1000.0},
    "front": {
        "unsprung_mass": 60.0,
        "tyre_radius": 0.33,
        "spring": {"rate": 40000.0},
        "damper": {"rate": 1700.0},
        "tyre": {"rate": 450000.0, "damping": 700.0},
        "droop_stop": None,
        "bump_stop": None,
    },
    "rear": {
        "unsprung_mass": 160.0,
        "housing_inertia": 2.0,
        "tyre_radius": 0.4,
        "linkage": {
            "kind": "four-link",
            "lower": {"chassis": [0.56, 0.22], "housing": [0.01, 0.26]},
            "upper": {"chassis": [0.46, 0.35], "housing": [0.02, 0.48]},
        },
        "springs": [
            {
                "chassis": [-0.1, 0.85],
                "housing": [-0.13, 0.33],
                "spring": {"rate": 52000.0},
                "damper": {"rate": 2100.0},
            }
        ],
        "tyre": {"rate": 430000.0, "damping": 800.0},
        "droop_stop": None,
        "bump_stop": None,
    },
    "wheelie_bar": None,
    "hit": {"kind": "force", "table": [[0.0, 0.0], [0.05, 10000.0]]},
    "run": {"duration": 0.02, "output_step": 0.005},
}


def warm() -> None:
    """Compile the kernel, or load it from disk, by solving a short run.

    Takes seconds once per machine and kernel, then a fraction of a second per
    process. A worker calls it as it starts.
    """
    from solver.carfile import car_from_dict
    from solver.launching import launch
    from solver.sweeping import sweep

    car = car_from_dict(EXAMPLE)
    launch(car)
    sweep(car, {"hit.scale": [1.0]})
