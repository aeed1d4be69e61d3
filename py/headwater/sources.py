"""Published sources of the relations and coefficients, each with its mark.

V recomputed and matched to an official value or an independent library, S one secondary source,
P common practice of the trade, M from memory, D derived and checkable.
"""

from typing import NamedTuple


class Source(NamedTuple):
    """Where a relation or a number comes from."""

    text: str
    mark: str


SOURCES = {
    "if97": Source("IAPWS-IF97, region 4, equations 30 and 31", "V"),
    "kell1975": Source("Kell 1975, J. Chem. Eng. Data 20, 97", "V"),
    "viscosity": Source("IAPWS SR6-08, equation 7", "V"),
    "ussa1976": Source("US Standard Atmosphere 1976; ISO 2533", "V"),
    "icao7488": Source("ICAO Doc 7488, altimeter setting", "V"),
    "affinity": Source("Pump affinity law", "V"),
    "terwisga1996": Source("van Terwisga 1996; Allison 1993", "M"),
    "eslamdoost2018": Source("Eslamdoost et al. 2018, Ocean Eng. 152", "S"),
    "npsh": Source("Definition of NPSH and of suction specific speed", "D"),
    "learned": Source("Bayes' rule on the notes, flat prior in ln S", "D"),
    "reserve": Source("ANSI/HI 9.6.1, margins of 1.1 to 1.3, in secondary sources", "S"),
    "si": Source("SI brochure; NIST SP 811, conversion factors", "V"),
    "practice": Source("Common practice of the trade", "P"),
    "measured": Source("Measured on the boat", "P"),
}
