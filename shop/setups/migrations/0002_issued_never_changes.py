"""The database itself refuses to change an issued revision, whatever code asks it to.

SQLite rebuilds a table, and drops its triggers, when a later migration alters it: such a
migration must run `lock` again (tests/shop/test_issued_revision_never_changes.py notices).
"""

from django.db import migrations

WORDS = "an issued revision never changes; start the next one from it"

LOCK = {
    "sqlite": [
        f"""
        CREATE TRIGGER setups_revision_issued_never_changes
        BEFORE UPDATE ON setups_revision FOR EACH ROW WHEN OLD.number IS NOT NULL
        BEGIN SELECT RAISE(ABORT, '{WORDS}'); END
        """,
    ],
    "postgresql": [
        f"""
        CREATE FUNCTION setups_revision_issued_never_changes() RETURNS trigger AS $$
        BEGIN RAISE EXCEPTION '{WORDS}' USING ERRCODE = 'restrict_violation'; END
        $$ LANGUAGE plpgsql
        """,
        """
        CREATE TRIGGER setups_revision_issued_never_changes
        BEFORE UPDATE ON setups_revision FOR EACH ROW WHEN (OLD.number IS NOT NULL)
        EXECUTE FUNCTION setups_revision_issued_never_changes()
        """,
    ],
}

UNLOCK = {
    "sqlite": ["DROP TRIGGER setups_revision_issued_never_changes"],
    "postgresql": [
        "DROP TRIGGER setups_revision_issued_never_changes ON setups_revision",
        "DROP FUNCTION setups_revision_issued_never_changes()",
    ],
}


def _run(statements, schema_editor):
    vendor = schema_editor.connection.vendor
    if vendor not in statements:
        raise NotImplementedError(f"no trigger is written for {vendor}; an issued revision could be changed there")
    for statement in statements[vendor]:
        schema_editor.execute(statement)


def lock(apps, schema_editor):
    _run(LOCK, schema_editor)


def unlock(apps, schema_editor):
    _run(UNLOCK, schema_editor)


class Migration(migrations.Migration):
    dependencies = [("setups", "0001_initial")]

    operations = [migrations.RunPython(lock, unlock)]
