"""One site for the tests of the report: all kinds of obstacle, a gap in the survey, names full of markup."""

import pytest

from siteassess import Assessment, assess, read_site

SITE = """\
format = 1

[site]
name = 'Roof <b>&amp; "x"</b> #let $x_1$ *y* =1+1'
latitude_deg = 57.14
longitude_deg = -2.09
height_m = 61.2
surveyed_by = "@A. Nobody <i>"

[mount]
mast_height_m = 1.5

[antenna]
pattern = "choke-ring"

[[chain]]
part = "preamplifier"
gain_db = 40.0
noise_figure_db = 1.8
[[chain]]
part = "cable <u> #pagebreak()"
loss_db = 4.5
[[chain]]
part = "receiver"
noise_figure_db = 8.0
implementation_loss_db = 1.0

[[horizon]]
source = "survey"
file = "horizon.csv"
surveyed_on = 2026-10-04
azimuth_error_deg = 1.0

[sky]
days = 1
step_s = 600

[require]
elevation_mask_deg = 10
min_cn0_dbhz = 33
"""

HORIZON = """\
azimuth_deg,elevation_deg,distance_m,obstacle,cover,depth_m,underside_deg
0,3,,,,,
30,4,,,,,
60,2,,,,,
90,2,,,,,
120,2,,,,,
150,3,,,,,
180,2,,,,,
210,2,,,,,
240,2,,,,,
270,2,,,,,
300,3,,,,,
140,38,24,<script>alert(1)</script>,solid,,
165,47,20,<script>alert(1)</script>,solid,,
190,38,24,<script>alert(1)</script>,solid,,
350,25,,=SUM(A1) $x^2$,solid,,
12,22,,=SUM(A1) $x^2$,solid,,
205,30,70,#pagebreak() \u5317\u5854,solid,,28
260,30,72,#pagebreak() \u5317\u5854,solid,,27
60,25,15,_limes_ &amp;,foliage,4,
80,28,15,_limes_ &amp;,foliage,4,
"""


@pytest.fixture(scope="session")
def markup_site(tmp_path_factory):
    folder = tmp_path_factory.mktemp("markup")
    (folder / "site.toml").write_text(SITE, encoding="utf-8")
    (folder / "horizon.csv").write_text(HORIZON, encoding="utf-8")
    return folder / "site.toml"


@pytest.fixture(scope="session")
def markup_assessment(markup_site) -> Assessment:
    return assess(read_site(markup_site))
