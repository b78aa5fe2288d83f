"""Mounts and joints for the tests: crooked numbers, so that no symmetry hides a mistake."""

from hypothesis import strategies as st

from trunnion.mount.hinges import Hinges
from trunnion.mount.joints import Joints
from trunnion.mount.mount import JointLimits, Mount

MOUNT = Mount(
    Hinges.azimuth_elevation(),
    JointLimits(-271.0, 268.0, 6.3, 2.9),
    JointLimits(1.5, 91.0, 4.7, 2.1),
    Joints(12.7, 88.3),
)

azimuths = st.floats(0.0, 359.999)
elevations = st.floats(-89.9, 89.9)
hinges = st.one_of(
    st.sampled_from(
        [
            Hinges.azimuth_elevation(),
            Hinges.x_y_north_south(),
            Hinges.x_y_east_west(),
            Hinges.hour_angle_declination(47.3),
            Hinges.hour_angle_declination(-33.1),
        ]
    ),
    st.builds(Hinges, st.floats(0.0, 359.9), st.floats(-89.0, 89.0), is_clockwise=st.booleans()),
)
