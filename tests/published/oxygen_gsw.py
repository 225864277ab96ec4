"""Oxygen in air-saturated fresh water against gsw (TEOS-10: Garcia & Gordon on Benson & Krause), within
0.3 % from 0 to 40 degC. Usage: oxygen_gsw.py CAPSIGH"""
import json
import subprocess
import sys

import gsw

worst = 0.0
for t in range(0, 41, 4):
    recipe = f'[gas]\nair = "100 %"\n[contact]\ntemperature = "{t} degC"\npressure = "1 atm abs"\n'
    out = subprocess.run([sys.argv[1], "report", "-", "--as", "json"], input=recipe, text=True, capture_output=True,
                         check=True).stdout
    ours = json.loads(out)["dissolved"]["O2"]["mass_fraction"]["value"] / 31.9988e-3  # umol/kg
    worst = max(worst, abs(ours / float(gsw.O2sol_SP_pt(0, t)) - 1))
print(f"worst deviation {worst * 100:.3f} %")
sys.exit(0 if worst <= 3e-3 else 1)
