"""The version every stored result carries."""

SOLVER_VERSION = "1.0.0"
