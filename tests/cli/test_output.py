"""What a nested result looks like to people."""

from trunnion.cli.output import flattened


def test_units_stand_in_brackets_and_numbers_have_three_places() -> None:
    told = {
        "mount": {"reading_deg": [12.34567, -1.0], "reading_age_s": 0.0493044},
        "wind_gust_m_s": 7.25,
        "range_km": None,
        "is_planning": False,
        "phase": "tracking",
    }
    assert list(flattened(told)) == [
        ("mount: reading [°]", "12.346; -1.000"),
        ("mount: reading age [s]", "0.049"),
        ("wind gust [m/s]", "7.250"),
        ("range [km]", "none"),
        ("is planning", "no"),
        ("phase", "tracking"),
    ]
