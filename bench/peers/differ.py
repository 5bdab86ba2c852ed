# differ.py A.csv B.csv ...: the largest difference of each column from A
import sys, pandas as pd, numpy as np
def load(f):
    d = pd.read_csv(f, keep_default_na=False, na_values=['', 'NA'])
    d['bin'] = pd.to_datetime(d['bin'], utc=True).dt.tz_localize(None)
    return d.set_index(['zone', 'bin']).sort_index()
a = load(sys.argv[1])
for f in sys.argv[2:]:
    b = load(f)
    j = a.join(b, how='outer', lsuffix='_a', rsuffix='_b')
    r = []
    for c in a.columns:
        x, y = j[c+'_a'], j[c+'_b']
        r.append(f"{c} {np.nanmax(np.abs(x-y)):.2g}" + (f" (missing in one: {(x.isna()!=y.isna()).sum()})" if (x.isna() != y.isna()).any() else ''))
    print(f"{f}: rows {len(a)} vs {len(b)}; " + ', '.join(r))
