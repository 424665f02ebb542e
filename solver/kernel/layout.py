"""Where every number of a lane lives.

A lane is one row of floats `p` (inputs first, then what `rest` works out, then
curves and the drive table) and one row of integers `n` (counts, flags and the
places of the curves). A study changes inputs by writing into columns of `p`.
"""

MAX_LINES = 6  # four rear springs, and a line each for stops on mounts of their own

# Inputs ---------------------------------------------------------------------
(
    WHEELBASE,
    MASS,
    CG_X,
    CG_Z,
    CHASSIS_INERTIA,
    FRONT_MASS,
    FRONT_RADIUS,
    FRONT_TYRE_RATE,
    FRONT_TYRE_DAMPING,
    REAR_MASS,
    HOUSING_INERTIA,
    REAR_RADIUS,
    REAR_TYRE_RATE,
    REAR_TYRE_DAMPING,
    LOWER_CX,
    LOWER_CZ,
    LOWER_HX,
    LOWER_HZ,
    UPPER_CX,
    UPPER_CZ,
    UPPER_HX,
    UPPER_HZ,
    FRONT_BUMP_CLEARANCE,
    FRONT_DROOP_CLEARANCE,
    FRONT_BUMP_DAMPING,
    FRONT_DROOP_DAMPING,
    REAR_BUMP_CLEARANCE,
    REAR_DROOP_CLEARANCE,
    REAR_BUMP_DAMPING,
    REAR_DROOP_DAMPING,
    WHEELIE_X,
    WHEELIE_CLEARANCE,
    WHEELIE_RATE,
    WHEELIE_DAMPING,
    HIT_SCALE,
    DURATION,
    OUTPUT_STEP,
    WHEEL_INERTIA,
    GRIP,
    SLIDING_GRIP,
    SLIP_STIFFNESS,
    RELAXATION,
    ROLLOUT,
    ENGINE_INERTIA,
    ENGINE_SPEED,
    CREEP,
    CONVERTER_SIZE,
    FINAL_DRIVE,
    SHIFT_SPEED,
    EFFICIENCY,
) = range(50)
MAX_GEARS = 8
GEARS = 50

# Rear lines: four inputs each, then two derived each.
LINES = GEARS + MAX_GEARS
LINE_CX, LINE_CZ, LINE_HX, LINE_HZ, LINE_LENGTH, LINE_PRELOAD = range(6)
LINE_WIDTH = 6

# Derived by `rest` ----------------------------------------------------------
DERIVED = LINES + MAX_LINES * LINE_WIDTH
(
    SPRUNG_MASS,
    SPRUNG_X,
    SPRUNG_Z,
    REAR_STATIC,
    FRONT_STATIC,
    REAR_SPRING_STATIC,
    FRONT_SPRING_STATIC,
    LOWER_STATIC,
    UPPER_STATIC,
    LOWER_LENGTH,
    UPPER_LENGTH,
    FRONT_SQUASH,
    REAR_SQUASH,
    LAMBDA,
    # One over each mass and inertia: the right-hand side multiplies.
    PER_SPRUNG_MASS,
    PER_REAR_MASS,
    PER_FRONT_MASS,
    PER_CHASSIS_INERTIA,
    PER_HOUSING_INERTIA,
    # The links as solved: a ladder bar becomes two links from one pin.
    LCX,
    LCZ,
    LHX,
    LHZ,
    UCX,
    UCZ,
    UHX,
    UHZ,
) = range(DERIVED, DERIVED + 27)
# Curves' value and slope at zero as their first leg has them, a pair each.
LEGS = DERIVED + 27


# Integers -------------------------------------------------------------------
KIND, N_LINES, BUMP_LINE, DROOP_LINE, WHEELIE_ON, DRIVE, HIT_AT, HIT_COUNT = range(8)
TRAVEL_LINE, SHOCK_LINE, N_STATES, N_GEARS = 8, 9, 10, 11
FOUR_LINK, LADDER_BAR = 0, 1
NO_WHEELIE, ON_CHASSIS, ON_HOUSING = 0, 1, 2
FORCE_DRIVE, TORQUE_DRIVE, CLUTCH_DRIVE, CONVERTER_DRIVE = 0, 1, 2, 3

FRONT_STOPS = 12
# Curves: a pair (place, knots) each in `n`. At the place in `p`: (knot, change of
# slope) for each knot.
CURVES = 13
FRONT_SPRING, FRONT_DAMPER, FRONT_BUMP, FRONT_DROOP, REAR_BUMP, REAR_DROOP = range(6)
LINE_SPRING = 6
LINE_DAMPER = LINE_SPRING + MAX_LINES
ENGINE, CONVERTER_CAPACITY, TORQUE_RATIO = range(LINE_DAMPER + MAX_LINES, LINE_DAMPER + MAX_LINES + 3)
N_CURVES = TORQUE_RATIO + 1
INTEGERS = CURVES + 2 * N_CURVES
SCALARS = LEGS + 2 * N_CURVES

# State ----------------------------------------------------------------------
# Displacements from ride height, then the velocities in the same order.
X, Z, PITCH, HX, HZ, HOUSING, SLIDE = range(7)
COORDINATES = 7
# Drive torque only: rear wheels' spin (rad/s), their slip as the carcass lags it,
# engine speed (rad/s), and the gear in, counted from nil.
SPIN, SLIP, ENGINE_RATE, GEAR = 14, 15, 16, 17
PLAIN_STATES = 14
STATES = 18

# Outputs of the right-hand side ----------------------------------------------
(
    O_REAR_LOAD,
    O_FRONT_LOAD,
    O_UPPER,
    O_LOWER,
    O_REAR_SPRING,
    O_REAR_COIL,
    O_REAR_SHOCK,
    O_FRONT_SPRING,
    O_TRAVEL,
    O_TRAVEL_SPEED,
    O_SHOCK_TRAVEL,
    O_SHOCK_SPEED,
    O_FRONT_TRAVEL,
    O_FRONT_SPEED,
    O_PITCH,
    O_HOUSING,
    O_ACCELERATION,
    O_HIT,
    O_GRIP,
    O_RIDE_FRONT,
    O_RIDE_REAR,
    O_FRONT_CLEARANCE,
    O_REAR_STOP,
    O_FRONT_STOP,
    O_WHEELIE,
    # How far past its clearance each rear stop's line is; negative is travel left.
    O_REAR_BUMP_PAST,
    O_REAR_DROOP_PAST,
    O_SPEED,
    O_DISTANCE,
    O_WHEEL_TORQUE,
    O_SPIN,
    O_SLIP,
    O_ENGINE,
    O_DRIFT,
    O_LEVERAGE,
    # What is zero at an event: the contacts' forces before they are cut at nil.
    O_GATE,
) = range(36)
N_GATES = 10
(GATE_FRONT_TYRE, GATE_REAR_TYRE, GATE_FRONT_BUMP, GATE_FRONT_DROOP) = range(4)
(GATE_REAR_BUMP, GATE_REAR_DROOP, GATE_WHEELIE, GATE_SHIFT) = range(4, 8)
# Contacts and shifts, where the model's slopes change; after them what is only dated.
N_KINKS = 8
GATE_ROLLOUT, GATE_SIXTY_FOOT = 8, 9
OUTPUTS = O_GATE + N_GATES
# Channels whose greatest and least values are kept at every step.
WATCHED = O_ENGINE + 1

# Accumulators: (greatest, its time, least, its time) for each watched channel, then:
A_WINDOWS = 4 * WATCHED
WINDOWS = (0.1, 0.25, 0.5)
A_FIRST_PEAK = A_WINDOWS + 3
A_FIRST_PEAK_TIME = A_WINDOWS + 4
A_DIP = A_WINDOWS + 5
A_DIP_TIME = A_WINDOWS + 6
A_DRIFT = A_WINDOWS + 7
A_ERROR = A_WINDOWS + 8
A_STEPS = A_WINDOWS + 9
# Every watched channel as it stood at the end.
A_LAST = A_WINDOWS + 10
ACCUMULATORS = A_LAST + WATCHED

EVENTS = 48

# Rows of a lane's work space.
WORK_ROWS, WORK_WIDTH = 12, OUTPUTS

# How a lane ended -------------------------------------------------------------
SOLVED, NOT_FINITE, LOCKED, TURNED_OVER, DRIFTED, INEXACT, FOLDED = range(7)
# Refused before it began: the links, the weights, or no rest at ride height.
BAD_LINKS, BAD_WEIGHTS, NO_REST, LINKS_LOCK, NOT_RUN = range(7, 12)
