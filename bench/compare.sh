#!/usr/bin/env bash
# Reading and auditing against engines people script such work with, as pairs in one run (see README.md here).
#   bench/compare.sh [FOLDER] [ROUNDS]     FOLDER takes 3 GB and is kept
set -euo pipefail
cd "$(dirname "$0")/.."
data=${1:-.cache/bench} rounds=${2:-3}
mkdir -p "$data/bin" "$data/out"
data=$(cd "$data" && pwd)
go build -o "$data/bin/" ./bench/logs ./bench/quarters ./bench/pairs ./cmd/sashlog
[ -e "$data/l12/points.csv" ] && [ -e "$data/l12.csv" ] || "$data/bin/logs" -out "$data"
for s in w12 l12; do # the peers' job is on quarters of an hour
  mkdir -p "$data/$s-15" && cp "$data/$s/points.csv" "$data/$s-15/"
  { cat "$data/$s/site.yaml"; echo 'step_min: 15'; } > "$data/$s-15/site.yaml"
done
node=missing-node
if command -v npm >/dev/null; then
  cp bench/peers/package.json bench/peers/duckdb.js "$data/bin/"
  (cd "$data/bin" && npm install --silent --no-fund --no-audit >/dev/null 2>&1) && node=node
fi
if [ "$(id -u)" = 0 ] && command -v apt-get >/dev/null; then
  dpkg -s r-cran-data.table python3-pandas >/dev/null 2>&1 ||
    { apt-get update -qq; DEBIAN_FRONTEND=noninteractive apt-get install -y -qq --no-install-recommends r-cran-data.table python3-pandas >/dev/null; } || true
fi
python=missing-python
for p in /usr/bin/python3 python3; do "$p" -c 'import pandas' 2>/dev/null && { python=$p; break; }; done
jobs="$data/jobs.txt"
: > "$jobs"
for s in w l; do
  file="$data/${s}12.csv" out="$data/out/$s"
  rows=525600; [ $s = l ] && rows=32447190
  line() { printf '%s\t%s\t%s\t%s\t%s\n' "$s-12" "$1" "$file" "$rows" "$2" >> "$jobs"; }
  line "DuckDB" "$node $data/bin/duckdb.js $s $file $out-duckdb.csv"
  line "sashlog: reading" "$data/bin/quarters $data/${s}12/site.yaml $out-grid.csv"
  line "sashlog: same table" "$data/bin/quarters $data/${s}12-15/site.yaml $out-sashlog.csv"
  line "sashlog: audit" "$data/bin/sashlog audit $data/${s}12/site.yaml --into $data/out/report-$s --quiet"
  if [ -z "${QUICK:-}" ]; then
    line "R data.table" "Rscript bench/peers/datatable.R $s $file $out-r.csv"
    line "pandas" "$python bench/peers/pandas_peer.py $s $file $out-pandas.csv"
  fi
done
"$data/bin/pairs" -rounds "$rounds" "$jobs"
if [ -e "$data/out/l-duckdb.csv" ] && [ $python != missing-python ]; then
  echo "largest difference of the means, ours against DuckDB's (change of value: the definitions are the same):"
  "$python" bench/peers/differ.py "$data/out/l-duckdb.csv" "$data/out/l-sashlog.csv"
fi
