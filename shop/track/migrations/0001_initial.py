from decimal import Decimal

import django.db.models.deletion
from django.conf import settings
from django.db import migrations, models


class Migration(migrations.Migration):
    initial = True

    dependencies = [
        ("garage", "0001_initial"),
        ("people", "0001_initial"),
        ("setups", "0001_initial"),
        migrations.swappable_dependency(settings.AUTH_USER_MODEL),
    ]

    operations = [
        migrations.CreateModel(
            name="Weekend",
            fields=[
                ("id", models.BigAutoField(auto_created=True, primary_key=True, serialize=False, verbose_name="ID")),
                ("place", models.CharField(max_length=80)),
                ("starts_on", models.DateField()),
                ("ends_on", models.DateField()),
                ("elevation", models.JSONField(blank=True, help_text="As typed: {typed, value, unit}.", null=True)),
                ("surface", models.TextField(blank=True, max_length=4000)),
                ("notes", models.TextField(blank=True, max_length=4000)),
                ("version", models.PositiveIntegerField(default=1)),
                ("created_at", models.DateTimeField(auto_now_add=True)),
                ("shop", models.ForeignKey(on_delete=django.db.models.deletion.CASCADE, to="people.shop")),
            ],
            options={
                "ordering": ["-starts_on", "-id"],
            },
        ),
        migrations.CreateModel(
            name="WeatherReading",
            fields=[
                ("id", models.BigAutoField(auto_created=True, primary_key=True, serialize=False, verbose_name="ID")),
                ("day", models.DateField()),
                ("clock", models.TimeField()),
                ("temperature", models.FloatField()),
                ("temperature_unit", models.CharField(max_length=4)),
                ("pressure", models.FloatField()),
                ("pressure_unit", models.CharField(max_length=4)),
                (
                    "pressure_kind",
                    models.CharField(
                        choices=[
                            ("station", "at the track (station pressure)"),
                            ("altimeter", "reduced to sea level (altimeter setting)"),
                        ],
                        default="station",
                        max_length=9,
                    ),
                ),
                ("humidity", models.FloatField(help_text="Percent.")),
                ("shop", models.ForeignKey(on_delete=django.db.models.deletion.CASCADE, to="people.shop")),
                (
                    "weekend",
                    models.ForeignKey(
                        on_delete=django.db.models.deletion.CASCADE, related_name="weather", to="track.weekend"
                    ),
                ),
            ],
            options={
                "ordering": ["day", "clock"],
            },
        ),
        migrations.CreateModel(
            name="Pass",
            fields=[
                ("id", models.BigAutoField(auto_created=True, primary_key=True, serialize=False, verbose_name="ID")),
                ("number", models.PositiveIntegerField(help_text="Of this car on this weekend, from 1.")),
                ("day", models.DateField()),
                ("clock", models.TimeField(blank=True, null=True)),
                ("lane", models.CharField(blank=True, choices=[("left", "left"), ("right", "right")], max_length=5)),
                (
                    "reaction",
                    models.DecimalField(blank=True, decimal_places=4, max_digits=6, null=True, verbose_name="reaction"),
                ),
                (
                    "time_60",
                    models.DecimalField(blank=True, decimal_places=4, max_digits=6, null=True, verbose_name="60 ft"),
                ),
                (
                    "time_330",
                    models.DecimalField(blank=True, decimal_places=4, max_digits=6, null=True, verbose_name="330 ft"),
                ),
                (
                    "time_660",
                    models.DecimalField(blank=True, decimal_places=4, max_digits=6, null=True, verbose_name="660 ft"),
                ),
                (
                    "speed_660",
                    models.DecimalField(
                        blank=True, decimal_places=2, max_digits=6, null=True, verbose_name="speed at 660 ft"
                    ),
                ),
                (
                    "time_1000",
                    models.DecimalField(blank=True, decimal_places=4, max_digits=6, null=True, verbose_name="1000 ft"),
                ),
                (
                    "speed_1000",
                    models.DecimalField(
                        blank=True, decimal_places=2, max_digits=6, null=True, verbose_name="speed at 1000 ft"
                    ),
                ),
                (
                    "time_1320",
                    models.DecimalField(blank=True, decimal_places=4, max_digits=6, null=True, verbose_name="1320 ft"),
                ),
                (
                    "speed_1320",
                    models.DecimalField(
                        blank=True, decimal_places=2, max_digits=6, null=True, verbose_name="speed at 1320 ft"
                    ),
                ),
                ("speed_unit", models.CharField(choices=[("mph", "mph"), ("km/h", "km/h")], default="mph", max_length=4)),
                ("readings", models.JSONField(blank=True, default=dict)),
                (
                    "pressure_kind",
                    models.CharField(
                        choices=[
                            ("station", "at the track (station pressure)"),
                            ("altimeter", "reduced to sea level (altimeter setting)"),
                        ],
                        default="station",
                        max_length=9,
                    ),
                ),
                ("drive_notes", models.CharField(blank=True, max_length=400, verbose_name="clutch or converter")),
                ("staging_notes", models.CharField(blank=True, max_length=400, verbose_name="staging")),
                ("driver_saw", models.TextField(blank=True, max_length=4000)),
                ("crew_saw", models.TextField(blank=True, max_length=4000)),
                ("aborted", models.BooleanField(default=False)),
                ("abort_reason", models.CharField(blank=True, max_length=200)),
                (
                    "good_to",
                    models.CharField(
                        blank=True,
                        choices=[
                            ("time_60", "60 ft"),
                            ("time_330", "330 ft"),
                            ("time_660", "660 ft"),
                            ("time_1000", "1000 ft"),
                        ],
                        max_length=9,
                    ),
                ),
                ("entry_key", models.UUIDField(blank=True, null=True)),
                ("version", models.PositiveIntegerField(default=1)),
                ("created_at", models.DateTimeField(auto_now_add=True)),
                (
                    "car",
                    models.ForeignKey(on_delete=django.db.models.deletion.PROTECT, related_name="passes", to="garage.car"),
                ),
                (
                    "entered_by",
                    models.ForeignKey(null=True, on_delete=django.db.models.deletion.SET_NULL, to=settings.AUTH_USER_MODEL),
                ),
                (
                    "revision",
                    models.ForeignKey(
                        blank=True,
                        null=True,
                        on_delete=django.db.models.deletion.PROTECT,
                        related_name="passes",
                        to="setups.revision",
                    ),
                ),
                ("shop", models.ForeignKey(on_delete=django.db.models.deletion.CASCADE, to="people.shop")),
                (
                    "weekend",
                    models.ForeignKey(
                        on_delete=django.db.models.deletion.PROTECT, related_name="passes", to="track.weekend"
                    ),
                ),
            ],
            options={
                "verbose_name_plural": "passes",
                "ordering": ["day", models.OrderBy(models.F("clock"), nulls_last=True), "id"],
            },
        ),
        migrations.AddConstraint(
            model_name="weekend",
            constraint=models.CheckConstraint(condition=models.Q(("place", ""), _negated=True), name="weekend_has_a_place"),
        ),
        migrations.AddConstraint(
            model_name="weekend",
            constraint=models.CheckConstraint(
                condition=models.Q(("ends_on__gte", models.F("starts_on"))), name="weekend_ends_after_it_starts"
            ),
        ),
        migrations.AddConstraint(
            model_name="weatherreading",
            constraint=models.UniqueConstraint(fields=("weekend", "day", "clock"), name="weather_once_a_time"),
        ),
        migrations.AddConstraint(
            model_name="weatherreading",
            constraint=models.CheckConstraint(
                condition=models.Q(("humidity__gte", 0), ("humidity__lte", 100)), name="weather_humidity_percent"
            ),
        ),
        migrations.AddConstraint(
            model_name="weatherreading",
            constraint=models.CheckConstraint(
                condition=models.Q(("temperature__gt", -1000000000000.0), ("temperature__lt", 1000000000000.0)),
                name="weather_temperature_finite",
            ),
        ),
        migrations.AddConstraint(
            model_name="weatherreading",
            constraint=models.CheckConstraint(
                condition=models.Q(("pressure__gt", 0), ("pressure__lt", 1000000000000.0)), name="weather_pressure_positive"
            ),
        ),
        migrations.AddConstraint(
            model_name="weatherreading",
            constraint=models.CheckConstraint(
                condition=models.Q(("pressure_kind__in", ["station", "altimeter"])), name="weather_pressure_kind_known"
            ),
        ),
        migrations.AddIndex(
            model_name="pass",
            index=models.Index(fields=["car", "day"], name="track_pass_car_id_b4d94e_idx"),
        ),
        migrations.AddIndex(
            model_name="pass",
            index=models.Index(fields=["revision"], name="track_pass_revisio_a0992b_idx"),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.UniqueConstraint(fields=("weekend", "car", "number"), name="pass_number_once"),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.UniqueConstraint(fields=("shop", "entry_key"), name="pass_entered_once"),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(condition=models.Q(("number__gte", 1)), name="pass_number_from_one"),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(("lane__in", ["", "left", "right"])), name="pass_lane_known"
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(("speed_unit__in", ["mph", "km/h"])), name="pass_speed_unit_known"
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(("pressure_kind__in", ["station", "altimeter"])), name="pass_pressure_kind_known"
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(("aborted", True), models.Q(("abort_reason", ""), ("good_to", "")), _connector="OR"),
                name="pass_aborted_or_whole",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(("good_to__in", ["", "time_60", "time_330", "time_660", "time_1000"])),
                name="pass_good_to_known",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("reaction__isnull", True),
                    models.Q(("reaction__gte", Decimal("-5")), ("reaction__lte", Decimal("30"))),
                    _connector="OR",
                ),
                name="pass_reaction_in_range",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("time_60__isnull", True),
                    models.Q(("time_60__gte", Decimal("0.0001")), ("time_60__lte", Decimal("60"))),
                    _connector="OR",
                ),
                name="pass_time_60_in_range",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("time_330__isnull", True),
                    models.Q(("time_330__gte", Decimal("0.0001")), ("time_330__lte", Decimal("60"))),
                    _connector="OR",
                ),
                name="pass_time_330_in_range",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("time_660__isnull", True),
                    models.Q(("time_660__gte", Decimal("0.0001")), ("time_660__lte", Decimal("60"))),
                    _connector="OR",
                ),
                name="pass_time_660_in_range",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("time_1000__isnull", True),
                    models.Q(("time_1000__gte", Decimal("0.0001")), ("time_1000__lte", Decimal("60"))),
                    _connector="OR",
                ),
                name="pass_time_1000_in_range",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("time_1320__isnull", True),
                    models.Q(("time_1320__gte", Decimal("0.0001")), ("time_1320__lte", Decimal("60"))),
                    _connector="OR",
                ),
                name="pass_time_1320_in_range",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("speed_660__isnull", True),
                    models.Q(("speed_660__gte", Decimal("0.01")), ("speed_660__lte", Decimal("999"))),
                    _connector="OR",
                ),
                name="pass_speed_660_in_range",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("speed_1000__isnull", True),
                    models.Q(("speed_1000__gte", Decimal("0.01")), ("speed_1000__lte", Decimal("999"))),
                    _connector="OR",
                ),
                name="pass_speed_1000_in_range",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("speed_1320__isnull", True),
                    models.Q(("speed_1320__gte", Decimal("0.01")), ("speed_1320__lte", Decimal("999"))),
                    _connector="OR",
                ),
                name="pass_speed_1320_in_range",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("time_60__isnull", True),
                    ("time_330__isnull", True),
                    ("time_330__gt", models.F("time_60")),
                    _connector="OR",
                ),
                name="pass_time_330_after_time_60",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("time_60__isnull", True),
                    ("time_660__isnull", True),
                    ("time_660__gt", models.F("time_60")),
                    _connector="OR",
                ),
                name="pass_time_660_after_time_60",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("time_60__isnull", True),
                    ("time_1000__isnull", True),
                    ("time_1000__gt", models.F("time_60")),
                    _connector="OR",
                ),
                name="pass_time_1000_after_time_60",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("time_60__isnull", True),
                    ("time_1320__isnull", True),
                    ("time_1320__gt", models.F("time_60")),
                    _connector="OR",
                ),
                name="pass_time_1320_after_time_60",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("time_330__isnull", True),
                    ("time_660__isnull", True),
                    ("time_660__gt", models.F("time_330")),
                    _connector="OR",
                ),
                name="pass_time_660_after_time_330",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("time_330__isnull", True),
                    ("time_1000__isnull", True),
                    ("time_1000__gt", models.F("time_330")),
                    _connector="OR",
                ),
                name="pass_time_1000_after_time_330",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("time_330__isnull", True),
                    ("time_1320__isnull", True),
                    ("time_1320__gt", models.F("time_330")),
                    _connector="OR",
                ),
                name="pass_time_1320_after_time_330",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("time_660__isnull", True),
                    ("time_1000__isnull", True),
                    ("time_1000__gt", models.F("time_660")),
                    _connector="OR",
                ),
                name="pass_time_1000_after_time_660",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("time_660__isnull", True),
                    ("time_1320__isnull", True),
                    ("time_1320__gt", models.F("time_660")),
                    _connector="OR",
                ),
                name="pass_time_1320_after_time_660",
            ),
        ),
        migrations.AddConstraint(
            model_name="pass",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    ("time_1000__isnull", True),
                    ("time_1320__isnull", True),
                    ("time_1320__gt", models.F("time_1000")),
                    _connector="OR",
                ),
                name="pass_time_1320_after_time_1000",
            ),
        ),
    ]
