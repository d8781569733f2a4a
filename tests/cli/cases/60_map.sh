# The process map.
M='--alloy 316L --d4sigma 80 --power 60:400:33 --speed 200:2000:33 --hatch 110 --layer 40'
expect 'map summary' 0 'nominal  lack of  keyhole
^ *110 *40 .*W, .* mm/s: nominal' - -- map $M
expect 'map json' 0 '"share_nominal": 0\.
"most_robust": {"power_W"' - -- map $M --format json
expect 'map csv is the grid' 0 '^60,200,110,40,80,20,' - -- map $M --format csv
[ "$(wc -l <out)" -eq 1090 ] && pass 'map csv has every cell' || fail 'map csv has every cell' "$(wc -l <out)"
expect 'map with 129 values by default' 0 '129 powers x 129 speeds' - -- map --alloy 316L --d4sigma 80 --power 60:400 --speed 200:2000 --hatch 110 --layer 40
for f in svg png pdf; do
    expect "map to $f" 0 '' "picture in m.$f" -- map $M -o m.$f --contours width,depth,build-rate --energy-lines 40,80 --from "$root/tests/demo/settings.csv"
    cp m.$f first.$f
    expect "map to $f again" 0 '' '' -- map $M -o m.$f --contours width,depth,build-rate --energy-lines 40,80 --from "$root/tests/demo/settings.csv" --force
    cmp -s m.$f first.$f && pass "same bytes of $f" || fail "same bytes of $f" ''
done
for z in UTC0 JST-9 EST5EDT; do
    TZ=$z "$program" map $M -o zone-$z.pdf --quiet >out
    cmp -s zone-UTC0.pdf zone-$z.pdf && pass "pdf in time zone $z" || fail "pdf in time zone $z" ''
done
head -c 4 m.png | od -c | grep -q 'P   N   G' && pass 'png is a png' || fail 'png is a png' ''
head -c 5 m.pdf | grep -q '%PDF-' && pass 'pdf is a pdf' || fail 'pdf is a pdf' ''
grep -q '<svg' m.svg && pass 'svg is an svg' || fail 'svg is an svg' ''
expect 'large map' 0 '' '' -- map --alloy 316L --d4sigma 80 --power 60:400 --speed 200:2000 --hatch 90,110 --layer 30,40 -o big.svg --quiet --energy-lines auto --contours width
[ "$(wc -c <big.svg)" -lt 300000 ] && pass 'four panels of 129 x 129 stay under 300 kB' || fail 'svg size' "$(wc -c <big.svg)"
refuse 'map does not overwrite' 4 'm.svg.*exists already' -- map $M -o m.svg
refuse 'unknown picture format' 2 'png' -- map $M -o m.bmp
refuse 'picture folder that is not there' 4 'nowhere/m.svg' -- map $M -o nowhere/m.svg
refuse 'contours typo' 3 "contours: 'widht' is not width, depth or build-rate; did you mean width?" -- map $M --contours widht
refuse 'energy line below zero' 3 'is not above 0' -- map $M --energy-lines -5
refuse 'energy line unit' 3 "energy-lines: unit 'J'" -- map $M --energy-lines 60J
refuse 'map needs a hatch' 2 'hatch is missing' -- map --alloy 316L --d4sigma 80 --power 60:400 --speed 200:2000 --layer 40
refuse 'map needs a layer' 2 'layer is missing' -- map --alloy 316L --d4sigma 80 --power 60:400 --speed 200:2000 --hatch 110
refuse 'map of one power' 2 'at least two powers' -- map --alloy 316L --d4sigma 80 --power 200 --speed 200:2000 --hatch 110 --layer 40
refuse 'map of bare plate' 3 'layers above 0' -- map --alloy 316L --d4sigma 80 --power 60:400 --speed 200:2000 --hatch 110 --layer 0
refuse 'too many panels' 3 'panels allowed' -- map --alloy 316L --d4sigma 80 --power 60:400:9 --speed 200:2000:9 --hatch 80:120:9 --layer 20:50:9
refuse 'map needs an alloy' 2 'alloy is missing' -- map --d4sigma 80 --power 60:400 --speed 200:2000 --hatch 110 --layer 40
for p in 1 2; do "$program" map $M --quiet --threads $p --format csv >t$p.csv; done
cmp -s t1.csv t2.csv && pass 'map on one thread and two' || fail 'map on one thread and two' ''
for m in gaussian rosenthal; do
    expect "map of model $m" 0 'nominal' '' -- map $M --model $m -o $m.svg
done
for a in Ti-6Al-4V 718 625 AlSi10Mg; do
    expect "map of $a" 0 'W, .* mm/s' '' -- map --alloy $a --d4sigma 80 --power 60:400:33 --speed 200:2000:33 --hatch 100 --layer 30 -o $a.png
done
[ -z "$(find . -name '*.part*')" ] && pass 'no half-drawn picture lies about' || fail 'no half-drawn picture lies about' "$(find . -name '*.part*')"
