"""Rebuilds the figure "share of the possible hours each zone reached" from hours.csv.

    /usr/bin/python3 league.py hours.csv league.csv league.png

Needs pandas and matplotlib (Debian: python3-pandas python3-matplotlib). Rows of
rooms for few people are days or weeks instead of hours; sums do not mind.
"""
import sys

import matplotlib
matplotlib.use("Agg")
import matplotlib.pyplot as plt
import pandas as pd

source, numbers, picture = sys.argv[1:4]
columns = ["achieved_h", "missed_h", "unjudged_suited_h", "suited_unknown_h", "occupied_unknown_h"]
hours = pd.read_csv(source, encoding="utf-8-sig", usecols=["zone"] + columns, dtype={"zone": str})
zones = hours.groupby("zone")[columns].sum()

possible = zones.achieved_h + zones.missed_h
unknown = zones.unjudged_suited_h + zones.suited_unknown_h + zones.occupied_unknown_h
league = pd.DataFrame({
    "share": zones.achieved_h / possible,                          # NaN without possible hours
    "low": zones.achieved_h / (possible + unknown),                # every unknown hour missed
    "high": (zones.achieved_h + unknown) / (possible + unknown),   # every unknown hour achieved
    "possible_h": possible,
})
league = league[league.possible_h > 0].sort_values("share")
league.to_csv(numbers)

figure, axes = plt.subplots(figsize=(6.7, 0.8 + 0.25 * len(league)))
axes.hlines(league.index, 100 * league.low, 100 * league.high, color="0.3", linewidth=1)
axes.plot(100 * league.share, league.index, "o", color="#00508a")
axes.set_xlim(0, 100)
axes.set_xlabel("achieved share of the hours that could have been open (%)")
figure.tight_layout()
figure.savefig(picture, dpi=150)
