#!/usr/bin/env bash
# Installs what the tests need beside Go: a browser for the printed report, tools that read PDF, the report's font, a C
# compiler for the race detector. As root on Debian; elsewhere it says what is missing.
set -u
declare -A need=([chromium]=chromium [pdftotext]=poppler-utils [pdffonts]=poppler-utils [gcc]=gcc)
missing=()
for program in "${!need[@]}"; do
  command -v "$program" >/dev/null 2>&1 || missing+=("${need[$program]}")
done
if ! { command -v fc-list >/dev/null 2>&1 && fc-list | grep -qi liberation; } && ! ls /usr/share/fonts/truetype/liberation* >/dev/null 2>&1; then
  missing+=(fonts-liberation)
fi
[ -e /usr/include/stdio.h ] || missing+=(libc6-dev)
[ ${#missing[@]} -eq 0 ] && exit 0
if [ "$(id -u)" = 0 ] && command -v apt-get >/dev/null 2>&1; then
  echo "installing: ${missing[*]}"
  export DEBIAN_FRONTEND=noninteractive
  apt-get update -qq && apt-get install -y -qq --no-install-recommends "${missing[@]}" >/dev/null && exit 0
fi
echo "missing for some tests: ${missing[*]} (Debian's names; as root: apt-get install ${missing[*]}); those tests will be skipped"
[ -n "${SASHLOG_REQUIRE_TOOLS:-}" ] && exit 1
exit 0
