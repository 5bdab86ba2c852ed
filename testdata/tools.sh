#!/usr/bin/env bash
# Installs what the tests need beside Go: a browser for the report, tools that read PDF, the report's font, a C compiler for
# the race detector, R and pandas for the worked examples of docs/, and into the cache folder the checks of accessibility that
# run in the browser. As root on Debian; elsewhere it says what is missing.
set -u
axe=4.14.1 # the tests name the same version
cache="${SASHLOG_CACHE:-${XDG_CACHE_HOME:-$HOME/.cache}/sashlog}"
declare -A need=([chromium]=chromium [pdftotext]=poppler-utils [pdffonts]=poppler-utils [gcc]=gcc [Rscript]=r-base-core)
[ -s "$cache/axe-core-$axe/node_modules/axe-core/axe.min.js" ] || need[npm]=npm
missing=()
for program in "${!need[@]}"; do
  command -v "$program" >/dev/null 2>&1 || missing+=("${need[$program]}")
done
if ! { command -v fc-list >/dev/null 2>&1 && fc-list | grep -qi liberation; } && ! ls /usr/share/fonts/truetype/liberation* >/dev/null 2>&1; then
  missing+=(fonts-liberation)
fi
# Debian's own Python, since packages of it are no use to another.
/usr/bin/python3 -c 'import pandas, matplotlib' >/dev/null 2>&1 || missing+=(python3-pandas python3-matplotlib)
[ -e /usr/include/stdio.h ] || missing+=(libc6-dev)
# A package by its exact version and nothing that runs at installation.
checks() {
  local file="$cache/axe-core-$axe/node_modules/axe-core/axe.min.js"
  [ -s "$file" ] && return 0
  command -v npm >/dev/null 2>&1 && mkdir -p "$cache/axe-core-$axe" &&
    npm install --prefix "$cache/axe-core-$axe" --no-save --no-package-lock --ignore-scripts --no-audit --no-fund --loglevel=error "axe-core@$axe" >/dev/null &&
    [ -s "$file" ] && return 0
  echo "missing for some tests: axe-core $axe (npm install --prefix $cache/axe-core-$axe axe-core@$axe); those tests will be skipped"
  [ -z "${SASHLOG_REQUIRE_TOOLS:-}" ]
}
if [ ${#missing[@]} -eq 0 ]; then checks; exit; fi
if [ "$(id -u)" = 0 ] && command -v apt-get >/dev/null 2>&1; then
  echo "installing: ${missing[*]}"
  export DEBIAN_FRONTEND=noninteractive
  apt-get update -qq && apt-get install -y -qq --no-install-recommends "${missing[@]}" >/dev/null && { checks; exit; }
fi
echo "missing for some tests: ${missing[*]} (Debian's names; as root: apt-get install ${missing[*]}); those tests will be skipped"
checks
[ -n "${SASHLOG_REQUIRE_TOOLS:-}" ] && exit 1
exit 0
