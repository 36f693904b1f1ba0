#!/usr/bin/env python3
"""Writes phreeqc-doses.csv: pH of a water after a dose, closed and at the carbon dioxide it had before, by PHREEQC.

    python3 -m venv /tmp/reference && /tmp/reference/bin/pip install phreeqpython==1.6.2
    /tmp/reference/bin/python tests/plans/phreeqc-doses.py > tests/plans/phreeqc-doses.csv

Last run with phreeqpython 1.6.2 (its phreeqc.dat) on Python 3.11. No test runs this: the tests read the stored values.
"""

from phreeqpython import PhreeqPython

ACIDS = ("HCl", "HNO3", "H2SO4")
TWO = ("Na2CO3", "K2CO3", "Ca(OH)2", "H2SO4")
MASS = {
    "NaHCO3": 84.0066, "KHCO3": 100.115, "Na2CO3": 105.988, "K2CO3": 138.205, "KOH": 56.105, "NaOH": 39.997,
    "Ca(OH)2": 74.092, "HCl": 36.458, "HNO3": 63.012, "H2SO4": 98.072,
}

pp = PhreeqPython(database="phreeqc.dat")
print("temperature,ph,alkalinity,substance,mg_per_l,ph_closed,ph_at_its_co2")
for t, ph, alk in ((22, 6.4, 40), (26, 6.8, 60), (14, 7.2, 90)):
    for name, mass in MASS.items():
        meq = alk / 50.0435
        water = pp.add_solution({"units": "mmol/kgw", "temp": t, "pH": ph, "Alkalinity": meq, "Na": meq})
        mmol = (0.1 if name in ACIDS else 0.2) / (2 if name in TWO else 1)
        pressure = water.si("CO2(g)")
        dosed = water.copy()
        dosed.add(name, mmol, "mmol")
        settled = dosed.copy()
        settled.equalize(["CO2(g)"], [pressure])
        print(f"{t},{ph},{alk},{name},{mmol * mass:.4f},{dosed.pH:.4f},{settled.pH:.4f}")
