"""Track: which joint path follows a target best."""
