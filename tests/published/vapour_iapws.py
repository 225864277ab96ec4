"""Vapour pressure of water against the IAPWS-95 saturation of python3-iapws, within 0.02 % from 0 to
100 degC (what the auxiliary equation promises there). Usage: vapour_iapws.py CAPSIGH TOP"""
import json
import subprocess
import sys

from iapws import IAPWS95

capsigh = sys.argv[1]
worst = 0.0
for t in range(1, 100, 7):
    recipe = f'[contact]\ntemperature = "{t} degC"\npressure = "3 bar abs"\n'
    out = subprocess.run([capsigh, "report", "-", "--as", "json"], input=recipe, text=True, capture_output=True,
                         check=True).stdout
    ours = json.loads(out)["headspace"]["partial_pressure"]["water"]["value"]
    reference = IAPWS95(T=t + 273.15, x=0).P * 1e3
    worst = max(worst, abs(ours / reference - 1))
print(f"worst deviation {worst * 100:.4f} %")
sys.exit(0 if worst <= 2e-4 else 1)
