"""For all tests: property tests run the same examples every time, and are not timed."""

from hypothesis import settings

settings.register_profile("steady", deadline=None, derandomize=True, max_examples=60)
settings.load_profile("steady")
