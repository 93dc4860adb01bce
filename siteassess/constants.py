"""Physical constants. The unit stands in the name, the source in the comment; derived ones are computed."""

SPEED_OF_LIGHT_M_PER_S = 299_792_458.0  # SI definition of the metre
BOLTZMANN_J_PER_K = 1.380649e-23  # SI 2019, exact
REFERENCE_TEMPERATURE_K = 290.0  # IEEE standard noise temperature

WGS84_SEMI_MAJOR_AXIS_M = 6_378_137.0  # WGS 84, NIMA TR8350.2
WGS84_FLATTENING = 1 / 298.257223563  # WGS 84, NIMA TR8350.2
EARTH_GRAVITY_M3_PER_S2 = 3.986004418e14  # WGS 84, NIMA TR8350.2
EARTH_ROTATION_RAD_PER_S = 7.2921151467e-5  # IS-GPS-200 20.3.3.4.3
EARTH_J2 = 1.08262668e-3  # EGM96 (value from memory); PZ-90 has 1.08262575e-3
SIDEREAL_DAY_S = 86_164.0905  # mean sidereal day, IERS conventions (value from memory)
