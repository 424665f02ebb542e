"""What a launch reports: every figure and every history, with label, dimension and meaning.

Pages, sheets, the API and the command line are generated from these two tables.
Dimensions are names, not units: force, length, speed, acceleration, time, angle,
torque, spin (rad/s), ratio, percent, coefficient. Values are SI; angles in radians.
"""

from __future__ import annotations

from typing import NamedTuple


class Quantity(NamedTuple):
    """How a number is called, what kind it is and what it means."""

    label: str
    dimension: str
    description: str


HISTORIES = {
    "t": Quantity("Time", "time", "From the start of the run"),
    "pitch": Quantity("Body pitch", "angle", "Nose up positive, nil at ride height"),
    "cg_x": Quantity("CG forward", "length", "Of the sprung mass, from rest"),
    "cg_z": Quantity("CG rise", "length", "Of the sprung mass, from rest"),
    "housing_angle": Quantity("Pinion angle", "angle", "Housing, nose up positive, nil at ride height"),
    "rear_spring_force": Quantity("Rear springs and shocks", "force", "Along their lines, both sides"),
    "rear_coil_force": Quantity("Rear springs", "force", "Springs alone, both sides"),
    "rear_shock_force": Quantity("Rear shocks", "force", "Compression positive, both sides"),
    "rear_spring_travel": Quantity("Rear spring travel", "length", "Compression positive, from ride height"),
    "rear_spring_velocity": Quantity("Rear spring speed", "speed", "Compression positive"),
    "rear_shock_travel": Quantity("Rear shock travel", "length", "Compression positive, from ride height"),
    "rear_shock_velocity": Quantity("Rear shock speed", "speed", "Compression positive"),
    "rear_load": Quantity("Rear tyres", "force", "On the ground, both sides"),
    "front_load": Quantity("Front tyres", "force", "On the ground, both sides"),
    "upper_link_force": Quantity(
        "Upper bars", "force", "Tension positive, both bars; ladder bar: across the bar at its pin"
    ),
    "lower_link_force": Quantity("Lower bars", "force", "Tension positive, both bars; ladder bar: along the bar"),
    "front_travel": Quantity("Front wheel travel", "length", "Bump positive, from ride height"),
    "front_velocity": Quantity("Front wheel speed", "speed", "Bump positive"),
    "front_spring_force": Quantity("Front springs and shocks", "force", "At the wheels, both sides"),
    "front_clearance": Quantity("Front tyres off the ground", "length", "Nil while they touch"),
    "ride_height_front": Quantity("Body rise at the front axle", "length", "From ride height"),
    "ride_height_rear": Quantity("Body rise at the rear axle", "length", "From ride height"),
    "instant_centre_x": Quantity("Instant centre ahead", "length", "Of the rear tyres' patch, as it moves"),
    "instant_centre_z": Quantity("Instant centre height", "length", "Above the ground, as it moves"),
    "anti_squat": Quantity("Anti-squat", "percent", "Trade definition, at each instant"),
    "acceleration": Quantity("Acceleration", "acceleration", "Forward, of the sprung CG"),
    "speed": Quantity("Speed", "speed", "Forward, of the sprung CG"),
    "distance": Quantity("Distance", "length", "Of the front axle from where it stood"),
    "hit": Quantity("Hit", "force", "Forward force of the rear tyres, both sides"),
    "grip_needed": Quantity("Grip needed", "coefficient", "Hit over rear load"),
    "rear_stop_force": Quantity("Rear stops", "force", "Bump positive, droop negative"),
    "front_stop_force": Quantity("Front stops", "force", "Bump positive, droop negative"),
    "wheelie_bar_load": Quantity("Wheelie bar", "force", "Its wheels on the ground"),
    "wheel_torque": Quantity("Wheel torque", "torque", "Both rear wheels; drive torque only"),
    "wheel_speed": Quantity("Rear wheel spin", "spin", "Drive torque only"),
    "slip": Quantity("Rear tyre slip", "ratio", "Share of road speed, as the carcass feels it"),
    "engine_speed": Quantity("Engine speed", "spin", "With an engine only"),
}


def _pair(name: str, label: str, dimension: str, description: str) -> dict[str, Quantity]:
    """A peak and when it was."""
    return {
        name: Quantity(label, dimension, description),
        f"{name}_time": Quantity(f"{label}: when", "time", "From the start of the run"),
    }


FIGURES = {
    **_pair("peak_rear_load", "Peak rear load", "force", "Greatest load on the rear tyres"),
    **_pair("least_rear_load", "Least rear load", "force", "Lowest load on the rear tyres"),
    **_pair("first_peak_rear_load", "First rear peak", "force", "Where the rear load first turns down"),
    **_pair("rear_load_dip", "Rear load dip", "force", "Lowest rear load after the first peak"),
    "mean_rear_load_100ms": Quantity("Mean rear load, 0.10 s", "force", "Over the first 0.10 s"),
    "mean_rear_load_250ms": Quantity("Mean rear load, 0.25 s", "force", "Over the first 0.25 s"),
    "mean_rear_load_500ms": Quantity("Mean rear load, 0.50 s", "force", "Over the first 0.50 s"),
    **_pair("peak_front_load", "Peak front load", "force", "Greatest load on the front tyres"),
    **_pair("least_front_load", "Least front load", "force", "Lowest load on the front tyres"),
    **_pair("peak_rear_spring_force", "Peak rear spring", "force", "Springs and shocks along their lines"),
    **_pair("least_rear_spring_force", "Least rear spring", "force", "Springs and shocks along their lines"),
    **_pair("peak_rear_shock_force", "Peak rear shock, compression", "force", "Greatest"),
    **_pair("least_rear_shock_force", "Peak rear shock, rebound", "force", "Greatest, negative"),
    **_pair("peak_front_spring_force", "Peak front spring", "force", "Spring and shock at the wheels"),
    **_pair("least_front_spring_force", "Least front spring", "force", "Spring and shock at the wheels"),
    **_pair("upper_link_tension", "Upper bars, greatest tension", "force", "Most positive, both bars"),
    **_pair("upper_link_compression", "Upper bars, greatest compression", "force", "Most negative"),
    **_pair("lower_link_tension", "Lower bars, greatest tension", "force", "Most positive, both bars"),
    **_pair("lower_link_compression", "Lower bars, greatest compression", "force", "Most negative"),
    **_pair("rear_squat", "Rear squat", "length", "Greatest compression of the rear spring"),
    **_pair("rear_separation", "Rear separation", "length", "Greatest extension of the rear spring"),
    **_pair("rear_shock_compression_speed", "Rear shock speed, compression", "speed", "Greatest"),
    **_pair("rear_shock_rebound_speed", "Rear shock speed, rebound", "speed", "Greatest"),
    **_pair("front_bump", "Front bump", "length", "Greatest wheel travel up, from ride height"),
    **_pair("front_droop", "Front droop", "length", "Greatest wheel travel down, from ride height"),
    **_pair("peak_pitch", "Peak pitch", "angle", "Nose up"),
    **_pair("peak_housing_angle", "Peak pinion rise", "angle", "Housing turning nose up"),
    **_pair("least_housing_angle", "Peak pinion drop", "angle", "Housing turning nose down"),
    **_pair("front_rise", "Front body rise", "length", "Greatest, at the front axle"),
    **_pair("rear_rise", "Rear body rise", "length", "Greatest, at the rear axle"),
    **_pair("rear_drop", "Rear body drop", "length", "Lowest, at the rear axle; negative is down"),
    **_pair("peak_acceleration", "Peak acceleration", "acceleration", "Forward"),
    **_pair("peak_grip_needed", "Peak grip needed", "coefficient", "Hit over rear load"),
    **_pair("peak_grip_used", "Peak grip used", "ratio", "Hit over what the tyres could hold"),
    "front_lift_time": Quantity("Front tyres leave", "time", "First time, if they do"),
    **_pair("front_lift_height", "Front wheel lift", "length", "Greatest gap below the front tyres"),
    "front_landing_time": Quantity("Front tyres land", "time", "First time after they left"),
    "rear_unload_time": Quantity("Rear tyres unload", "time", "First time they carry nothing"),
    "rear_bottoming_time": Quantity("Rear bottoms", "time", "First touch of the bump stop"),
    "rear_topping_time": Quantity("Rear tops", "time", "First touch of the droop stop"),
    "front_bottoming_time": Quantity("Front bottoms", "time", "First touch of the bump stop"),
    "front_topping_time": Quantity("Front tops", "time", "First touch of the droop stop"),
    "wheelie_bar_time": Quantity("Wheelie bar touches", "time", "First time"),
    **_pair("peak_wheelie_bar_load", "Peak wheelie bar load", "force", "Its wheels on the ground"),
    **_pair("peak_rear_bump_stop_force", "Peak rear bump stop", "force", "Greatest"),
    **_pair("peak_rear_droop_stop_force", "Peak rear droop stop", "force", "Greatest"),
    **_pair("peak_front_bump_stop_force", "Peak front bump stop", "force", "Greatest"),
    **_pair("peak_front_droop_stop_force", "Peak front droop stop", "force", "Greatest"),
    "rear_bump_travel_left": Quantity("Rear bump travel left", "length", "To the stop at deepest squat"),
    "rear_droop_travel_left": Quantity("Rear droop travel left", "length", "To the stop at full extension"),
    "front_bump_travel_left": Quantity("Front bump travel left", "length", "To the stop"),
    "front_droop_travel_left": Quantity("Front droop travel left", "length", "To the stop"),
    **_pair("peak_slip", "Peak rear tyre slip", "ratio", "As the carcass feels it; drive torque only"),
    **_pair("peak_wheel_torque", "Peak wheel torque", "torque", "Both rear wheels; drive torque only"),
    **_pair("least_engine_speed", "Lowest engine speed", "spin", "With an engine only"),
    "rollout_time": Quantity("Rollout", "time", "Until the front tyres clear the starting beam"),
    "sixty_foot_time": Quantity("60 ft time", "time", "From the beam, 60 ft past the rollout"),
    "end_speed": Quantity("Speed at the end", "speed", "Of the run solved"),
    "end_distance": Quantity("Distance at the end", "length", "Of the run solved"),
}

STATIC_FIGURES = {
    "rear_load": Quantity("Rear tyres at rest", "force", "Both sides"),
    "front_load": Quantity("Front tyres at rest", "force", "Both sides"),
    "rear_spring_force": Quantity("Rear springs at rest", "force", "Solved preload, both sides"),
    "upper_link_force": Quantity("Upper bars at rest", "force", "Tension positive, both bars"),
    "lower_link_force": Quantity("Lower bars at rest", "force", "Tension positive, both bars"),
    "instant_centre_x": Quantity("Instant centre ahead", "length", "Of the rear axle"),
    "instant_centre_z": Quantity("Instant centre height", "length", "Above the ground"),
    "instant_centre_slope": Quantity("Force line slope", "ratio", "From the rear patch"),
    "anti_squat": Quantity("Anti-squat", "percent", "Trade definition, whole-car CG"),
    "anti_squat_dynamic": Quantity("Anti-squat, sprung mass", "percent", "At 100 the spring stays put"),
    "upper_bar_length": Quantity("Upper bar length", "length", "Centre to centre, true"),
    "lower_bar_length": Quantity("Lower bar length", "length", "Centre to centre, true"),
}
