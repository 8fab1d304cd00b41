"""The site: where things may stand.  Coordinate grid, boundary, obstacles and ground, read from the files a scenario's [site] names.

Everything here is in the scenario's own coordinates: metres east, north and up from the site's origin.
"""

from guys.site.grid import Grid
from guys.site.ground import Ground
from guys.site.model import Obstacle, Site
from guys.site.read import SiteFault, read_site

__all__ = ["Grid", "Ground", "Obstacle", "Site", "SiteFault", "read_site"]
