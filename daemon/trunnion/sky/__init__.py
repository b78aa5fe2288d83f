"""Sky: where a target stands, seen from the station."""
