import django.db.models.deletion
from django.conf import settings
from django.db import migrations, models


class Migration(migrations.Migration):
    initial = True

    dependencies = [
        ("people", "0001_initial"),
        ("garage", "0001_initial"),
        migrations.swappable_dependency(settings.AUTH_USER_MODEL),
    ]

    operations = [
        migrations.CreateModel(
            name="Revision",
            fields=[
                ("id", models.BigAutoField(auto_created=True, primary_key=True, serialize=False, verbose_name="ID")),
                ("number", models.PositiveIntegerField(blank=True, null=True)),
                ("reason", models.CharField(help_text="What this changes, and why.", max_length=200)),
                ("notes", models.TextField(blank=True, max_length=4000)),
                ("holes", models.JSONField()),
                ("settings", models.JSONField()),
                ("hit_table", models.JSONField(blank=True, null=True)),
                ("parts", models.JSONField(blank=True, default=dict)),
                ("hit_lines", models.TextField(blank=True, max_length=4000)),
                ("hit_lines_unit", models.CharField(blank=True, max_length=12)),
                ("car_file", models.JSONField(blank=True, null=True)),
                ("version", models.PositiveIntegerField(default=1)),
                ("created_at", models.DateTimeField(auto_now_add=True)),
                ("issued_at", models.DateTimeField(blank=True, null=True)),
                ("author", models.ForeignKey(on_delete=django.db.models.deletion.PROTECT, to=settings.AUTH_USER_MODEL)),
                ("car", models.ForeignKey(
                    on_delete=django.db.models.deletion.PROTECT, related_name="revisions", to="garage.car")),
                ("parent", models.ForeignKey(
                    blank=True, null=True, on_delete=django.db.models.deletion.PROTECT, related_name="children",
                    to="setups.revision")),
                ("shop", models.ForeignKey(on_delete=django.db.models.deletion.CASCADE, to="people.shop")),
                ("survey", models.ForeignKey(
                    on_delete=django.db.models.deletion.PROTECT, related_name="revisions", to="garage.survey")),
            ],
            options={
                "ordering": [models.OrderBy(models.F("number"), descending=True, nulls_first=True), "-id"],
                "constraints": [
                    models.UniqueConstraint(fields=("car", "number"), name="revision_number_once"),
                    models.CheckConstraint(
                        condition=models.Q(
                            models.Q(("car_file__isnull", True), ("issued_at__isnull", True), ("number__isnull", True)),
                            models.Q(("car_file__isnull", False), ("issued_at__isnull", False), ("number__gte", 1)),
                            _connector="OR",
                        ),
                        name="revision_issued_whole",
                    ),
                    models.CheckConstraint(
                        condition=models.Q(
                            ("number__isnull", True), models.Q(("reason", ""), _negated=True), _connector="OR"
                        ),
                        name="revision_says_why",
                    ),
                ],
            },
        ),
    ]
