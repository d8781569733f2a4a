# Grids.
S='--alloy 316L --d4sigma 80 --power 150:300:4 --speed 600:1200:3 --hatch 90,110 --layer 30:50:2'
expect 'sweep csv' 0 '^power_W,speed
^150,600,90,30,80,20,' '48 settings: .* nominal' -- sweep $S
[ "$(wc -l <out)" -eq 49 ] && pass 'every cell once' || fail 'every cell once' "$(wc -l <out)"
expect 'sweep quiet' 0 '' - -- sweep $S --quiet
expect 'sweep text' 0 'p nom  verdict
nominal$' - -- sweep $S --format text --quiet
expect 'sweep json' 0 '"results": \[
"margin_power_up_pct"' - -- sweep $S --format json --quiet
expect 'sweep of tracks alone' 0 '^150,600,,0,80,20,' - -- sweep --alloy 316L --d4sigma 80 --power 150,200 --speed 600,800
for t in 1 2 3 8; do "$program" sweep $S --quiet --threads $t >by$t.csv; done
cmp -s by1.csv by2.csv && cmp -s by1.csv by3.csv && cmp -s by1.csv by8.csv && pass 'same bytes on any number of threads' || fail 'same bytes on any number of threads' ''
# A row of the sweep is what track says of it.
"$program" track --alloy 316L --d4sigma 80 --power 200 --speed 900 --hatch 110 --layer 50 --format csv | tail -n 1 | cut -d, -f1-20 >a
grep '^200,900,110,50,' by1.csv | cut -d, -f1-20 >b
cmp -s a b && pass 'sweep and track agree' || fail 'sweep and track agree' ''
refuse 'a grid of 1e9 cells' 3 '1e+09 cells.*is more than the 50000000 allowed' -- sweep --alloy 316L --d4sigma 80 --power 100:400:1000 --speed 200:2000:1000 --hatch 80:120:50 --layer 20:60:20
refuse 'an axis too long' 3 'COUNT 1000000000 is more' -- sweep --alloy 316L --d4sigma 80 --power 100:400:1e9 --speed 800
refuse 'a range of two' 3 "power: '100:200' is not START:STOP:COUNT" -- sweep --alloy 316L --d4sigma 80 --power 100:200 --speed 800
refuse 'a speed out of reason on the axis' 3 'speed 900000 mm/s' -- sweep --alloy 316L --d4sigma 80 --power 100 --speed 100,900000
# Parts in order are the whole, byte for byte.
"$program" sweep $S --quiet >whole.csv
for n in 1 2 5 48; do
    rm -f parts.csv
    for i in $(seq 1 $n); do "$program" sweep $S --quiet --shard $i/$n >>parts.csv; done
    cmp -s whole.csv parts.csv && pass "sweep in $n parts" || fail "sweep in $n parts" ''
done
for s in 0/3 4/3 1.5/3 x/3 3 1/0 -1/3; do refuse "shard $s" 3 'is not I/N' -- sweep $S --shard $s; done
refuse 'more parts than rows' 2 'fewer rows than that' -- sweep $S --shard 49/49
refuse 'parts of json' 2 'parts of other formats do not join' -- sweep $S --shard 1/2 --format json
refuse 'an option of another version' 2 'lot is not in this version' -- sweep $S --lot a.json
refuse 'a seed without samples' 2 'seed goes with --samples' -- sweep $S --seed 1
