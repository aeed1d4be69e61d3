"""Published sources of the relations and coefficients, each with its mark.

V recomputed and matched to an official value or an independent library, S one secondary source,
P common practice of the trade, M from memory, D derived and checkable.
"""

from typing import NamedTuple


class Source(NamedTuple):
    """Where a relation or a number comes from."""

    key: str
    text: str
    mark: str


SOURCES = {
    source.key: source
    for source in (
        Source("if97", "IAPWS-IF97, region 4, equations 30 and 31", "V"),
        Source("kell1975", "Kell 1975, J. Chem. Eng. Data 20, 97", "V"),
        Source("viscosity", "IAPWS SR6-08, equation 7", "V"),
        Source("ussa1976", "US Standard Atmosphere 1976; ISO 2533", "V"),
        Source("icao7488", "ICAO Doc 7488, altimeter setting", "V"),
        Source("affinity", "Pump affinity law", "V"),
        Source("terwisga1996", "van Terwisga 1996; Allison 1993", "M"),
        Source("memory", "Typical of jet units, from memory, no original read", "M"),
        Source("eslamdoost2018", "Eslamdoost et al. 2018, Ocean Eng. 152", "S"),
        Source("npsh", "Definition of NPSH and of suction specific speed", "D"),
        Source("learned", "Bayes' rule on the notes, flat prior in ln S", "D"),
        Source("iso1585", "ISO 1585 / UN R85, power correction of engines", "V"),
        Source("savitsky1964", "Savitsky 1964, Marine Technology 1; ITTC-57 friction line", "V"),
        Source("blount1976", "Blount and Fox 1976, hump factor", "V"),
        Source("inertia", "Momentum of the water column in the intake", "D"),
        Source("boyle", "Boyle's law on the air in the water", "D"),
        Source("elsey", "Elsey, Pumps & Systems; Murakami and Minemura 1974", "S"),
        Source("reserve", "ANSI/HI 9.6.1, margins of 1.1 to 1.3, in secondary sources", "S"),
        Source(
            "si",
            "Definitions of the units: a hp is 550 ft lbf/s, an inHg an inch of mercury at 13595.1 kg/m3",
            "D",
        ),
        Source("practice", "Common practice of the trade", "P"),
        Source("measured", "Measured on the boat; spread by common practice", "P"),
    )
}
