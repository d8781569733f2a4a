#!/bin/sh
# The main job on an invented case: from an alloy card to a process map.  usage: tests/demo/run.sh PROGRAM
set -eu
mw=$1
out=build/demo
mkdir -p "$out"
cat tests/demo/case.txt
say() { printf '\n$ meltwright %s\n' "$*"; }
run() { say "$@"; "$mw" "$@"; }

run track --alloy 316L --d4sigma 80 --power 200 --speed 800 --hatch 110 --layer 40
run track --from tests/demo/settings.csv --alloy 316L --d4sigma 80 -o "$out/settings.csv" --force
printf '\n'
awk -F, 'NR == 1 { for (i = 1; i <= NF; i++) at[$i] = i; printf "  %-12s %7s %7s %7s %7s %9s %9s  %s\n", "label", "W", "mm/s", "width", "depth", "nominal", "keyhole", "verdict"; next }
    { printf "  %-12s %7.0f %7.0f %7.1f %7.1f %9.2f %9.2f  %s\n", $at["label"], $at["power_W"], $at["speed_mm_per_s"], $at["width_um"], $at["depth_um"], $at["p_nominal"], $at["p_keyhole"], $at["verdict"] }' "$out/settings.csv"
for ending in svg png pdf; do
    set -- map --alloy 316L --d4sigma 80 --power 60:400 --speed 200:2000 --hatch 110 --layer 30,40,50 --from tests/demo/settings.csv \
        --energy-lines auto --contours width -o "$out/map.$ending" --force
    if [ $ending = svg ]; then run "$@"; else "$mw" "$@" >/dev/null; fi
done
printf '\nThe pictures: %s/map.svg, %s/map.png, %s/map.pdf. The table: %s/settings.csv (what made it: settings.csv.json).\n' "$out" "$out" "$out" "$out"
