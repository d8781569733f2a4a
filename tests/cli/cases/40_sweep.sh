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
# Under doubt: shares of the samples.
expect 'samples as csv' 0 '^power_W,speed_mm_per_s,hatch_um,layer_um,d4sigma_um,preheat_C,volumetric_energy_J_per_mm3,build_rate_cm3_per_h,samples,share_nominal,share_lack_of_fusion,share_keyhole,share_balling$
^150,600,90,30,80,20,' '48 settings x 200 samples' -- sweep $S --samples 200
awk -F, 'NR > 1 && ($10 + $11 + $12 < 0.999999 || $10 + $11 + $12 > 1.000001 || $9 != 200) { bad = 1 } END { exit bad || NR != 49 }' out &&
    pass 'shares sum to one in every cell' || fail 'shares sum to one in every cell' ''
expect 'samples as json' 0 '"results": \[
"share_balling": ' - -- sweep $S --samples 20 --format json --quiet
expect 'samples as text' 0 'share of the samples' - -- sweep $S --samples 20 --format text --quiet
for t in 1 2 5; do "$program" sweep $S --samples 300 --quiet --threads $t >by$t.csv; done
cmp -s by1.csv by2.csv && cmp -s by1.csv by5.csv && pass 'same shares on any number of threads' || fail 'same shares on any number of threads' ''
"$program" sweep $S --samples 300 --seed 2 --quiet >seed2.csv
cmp -s by1.csv seed2.csv && fail 'another seed, other draws' 'same bytes' || pass 'another seed, other draws'
rm -f parts.csv
for i in 1 2 3 4 5; do "$program" sweep $S --samples 300 --quiet --shard $i/5 >>parts.csv; done
cmp -s by1.csv parts.csv && pass 'shares in 5 parts' || fail 'shares in 5 parts' ''
for n in 0 -3 1.5 65536 many; do refuse "$n samples" 3 'samples' -- sweep $S --samples $n; done
refuse 'a seed out of range' 3 'seed must be a whole number' -- sweep $S --samples 5 --seed -1
refuse 'samples of tracks' 2 'samples need a hatch and a layer' -- sweep --alloy 316L --d4sigma 80 --power 150 --speed 600 --samples 5
refuse 'samples of another model' 2 'samples need the default model' -- sweep $S --samples 5 --model gaussian
# The README's recipe for many cores, as it stands there (GNU parallel is what Debian's package of that name installs).
grep -o 'seq 1 8 | parallel .*' "$root/README.md" | head -n 1 >recipe
if parallel --version 2>/dev/null | grep -q '^GNU parallel'; then
    sh recipe >/dev/null 2>err
    "$program" $(sed 's/.* meltwright \(sweep .*\) --shard .*/\1/' recipe) --quiet >whole.csv 2>/dev/null
    [ -s whole.csv ] && cmp -s whole.csv window.csv && pass 'shards by parallel join to the whole' || fail 'shards by parallel join to the whole' "$(wc -c <whole.csv) $(wc -c <window.csv)"
else
    echo 'not ok GNU parallel is missing: make check installs it'
    failed=$((failed + 1))
fi
