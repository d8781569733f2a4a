#!/bin/sh
# Draws the gallery in plots/ from the invented case.  usage: tests/demo/gallery.sh PROGRAM
set -eu
mw=$1
"$mw" map --alloy 316L --d4sigma 80 --power 60:400 --speed 200:2000 --hatch 110 --layer 30,40,50 --from tests/demo/settings.csv \
    --energy-lines auto -o plots/process-map.svg --force
"$mw" map --alloy Ti-6Al-4V --d4sigma 100 --power 60:400 --speed 200:2000 --hatch 100 --layer 30 --contours width,depth \
    -o plots/process-map-contours.svg --force
