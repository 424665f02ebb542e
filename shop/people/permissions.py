"""What members may do. Each permission is a named constant, and the tests walk them."""

READ = "read"
WRITE = "write"  # customers, cars, surveys, drafts, passes, parts
ISSUE = "issue"  # freeze a revision, start and cancel work
MANAGE = "manage"  # members, the shop's own settings

PERMISSIONS = (READ, WRITE, ISSUE, MANAGE)

ROLES = {
    "owner": frozenset({READ, WRITE, ISSUE, MANAGE}),
    "technician": frozenset({READ, WRITE, ISSUE}),
    "reader": frozenset({READ}),
}


def may(role: str, permission: str) -> bool:
    if permission not in PERMISSIONS:
        raise ValueError(f"no permission is called {permission!r}")
    return permission in ROLES.get(role, frozenset())
