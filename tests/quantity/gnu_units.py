"""Every unit of the grammar against GNU units (Debian package units). Usage: gnu_units.py UNIT-TABLE"""
import subprocess
import sys

# Our spelling -> theirs, and the SI unit of the dimension. Spelled out so that a new unit must be added here.
SI = {"pressure": "Pa", "temperature": "K", "temperature difference": "K", "volume": "m^3", "length": "m", "mass": "kg",
      "fraction": "1", "volumes of gas": "1", "mass concentration": "kg/m^3", "amount concentration": "mol/m^3",
      "molality": "mol/kg", "mass fraction": "1", "Brix or Plato": "1", "volume fraction": "1",
      "density": "kg/m^3", "time": "s", "area": "m^2", "mass flow": "kg/s", "volume flow": "m^3/s",
      "normal volume flow of gas": "m^3/s", "rate": "1/s", "stretch": "1/Pa", "transmission of gas": "m^3/s"}
THEIRS = {"bar": "bar", "barg": "bar", "bara": "bar", "mbar": "mbar", "hPa": "hPa", "kPa": "kPa", "MPa": "MPa",
          "Pa": "Pa", "psi": "psi", "psig": "psi", "psia": "psi", "atm": "atm", "mmHg": "mmHg", "inHg": "inHg",
          "K": "K", "degC": "degC", "°C": "degC", "degF": "degF", "°F": "degF", "m3": "m^3", "m³": "m^3",
          "hL": "hL", "L": "L", "cL": "cL", "mL": "mL", "US gal": "usgallon", "US fl oz": "usfloz",
          "US bbl": "usbeerbarrel", "imp gal": "brgallon", "imp fl oz": "brfloz", "UK bbl": "36 brgallon",
          "m": "m", "cm": "cm", "mm": "mm", "in": "inch", "ft": "ft", "kg": "kg", "g": "g", "mg": "mg", "ug": "ug",
          "lb": "lb", "oz": "oz", "%": "percent", "vol": "1", "g/L": "g/L", "mg/L": "mg/L", "ug/L": "ug/L",
          "µg/L": "ug/L", "g/100 mL": "g/(100 mL)", "kg/hL": "kg/hL", "kg/m3": "kg/m^3", "g/mL": "g/mL",
          "g/cm3": "g/cm^3", "mol/L": "mol/L", "mmol/L": "mmol/L", "mol/kg": "mol/kg", "mmol/kg": "mmol/kg",
          "% w/w": "percent", "g/kg": "g/kg", "mg/kg": "mg/kg", "ppm": "1e-6", "ppb": "1e-9", "Brix": "percent",
          "°Brix": "percent", "°Bx": "percent", "Plato": "percent", "°P": "percent", "% v/v": "percent", "% vol": "percent", "s": "s",
          "min": "min", "h": "hour", "d": "day", "wk": "week", "m2": "m^2", "cm2": "cm^2", "kg/h": "kg/hour",
          "g/s": "g/s", "lb/h": "lb/hour", "m3/h": "m^3/hour", "hL/h": "hL/hour", "L/min": "L/min",
          "ft3/min": "ft^3/min", "m3/h normal": "m^3/hour", "1/s": "1/s", "1/min": "1/min", "1/h": "1/hour",
          "1/d": "1/day", "%/bar": "percent/bar", "%/psi": "percent/psi", "mL/d": "mL/day", "cm3/d": "cm^3/day",
          "uL/d": "uL/day"}


def units(have, want):
    out = subprocess.run(["units", "-t", "-o", "%.15g", have, want], capture_output=True, text=True, check=True,
                         env={"LC_ALL": "C.UTF-8", "PATH": "/usr/bin:/bin"}).stdout
    return float(out)


bad = []
seen = 0
for line in subprocess.run([sys.argv[1]], capture_output=True, text=True, check=True).stdout.splitlines():
    text, dimension, factor, offset = line.split("\t")
    factor, offset = float(factor), float(offset)
    seen += 1
    if text not in THEIRS:
        bad.append(f"{text}: not in this test")
        continue
    theirs = THEIRS[text]
    if dimension == "temperature":
        got = units("tempC(40)" if theirs == "degC" else "tempF(40)" if theirs == "degF" else "40 K", "K")
        ours = 40 * factor + offset
    else:
        got = units(theirs, SI[dimension])
        ours = factor
    # Digits of GNU units' output; mmHg and inHg there are by a rounded density of mercury.
    tolerance = 1e-6 if "Hg" in text else 1e-12
    if abs(ours / got - 1) > tolerance:
        bad.append(f"{text} ({dimension}): ours {ours!r}, GNU units {got!r}")
print("\n".join(bad) or f"{seen} units agree")
sys.exit(1 if bad or seen < 80 else 0)
