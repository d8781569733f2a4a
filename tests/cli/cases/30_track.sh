# One setting, and tables.
B='--alloy 316L --d4sigma 80 --power 200 --speed 800'
F="$B --hatch 110 --layer 40"
expect 'track explains itself' 0 'melt pool
width .*in 9 of 10 tracks
even odds at
verdict *nominal
how far each factor
nearest cliff
local codes' - -- track $F
expect 'track without hatch gives the pool' 0 'no verdict: it needs --hatch and --layer' - -- track $B
expect 'track lack of fusion says what helps' 0 'verdict *lack-of-fusion
what would bring it into nominal
smallest change' - -- track --alloy 316L --d4sigma 80 --power 120 --speed 1500 --hatch 120 --layer 50
expect 'track too hot' 0 'verdict *keyhole' - -- track --alloy 316L --d4sigma 80 --power 380 --speed 300 --hatch 80 --layer 30
expect 'no track is an answer' 1 'no track: the surface does not reach melting' - -- track --alloy 316L --d4sigma 140 --power 20 --speed 2000
expect 'outside the record is said' 0 'outside what published tracks and cubes cover: power 900 W is above 600 W' - -- track --alloy 316L --d4sigma 80 --power 900 --speed 800 --hatch 100 --layer 40
expect 'rosenthal has no peak temperature' 0 'moving point source' - -- track $F --model rosenthal
"$program" track $F --model rosenthal --format json >r.json
grep -q '"peak_temperature_K": null' r.json && pass 'rosenthal peak is null' || fail 'rosenthal peak is null' ''
expect 'gaussian model' 0 'conduction only (Eagar' - -- track $F --model gaussian
expect 'track csv' 0 '^power_W,speed_mm_per_s,hatch_um,layer_um,d4sigma_um,preheat_C,width_um
^200,800,110,40,80,20,1[0-9][0-9]\.' - -- track $F --format csv
expect 'track json' 0 '"made_by": {"program": "meltwright"
"hash": "[0-9a-f]\{16\}"
"verdict": "nominal"' - -- track $F --format json
expect 'preheat in kelvin' 0 'plate at 200 C' - -- track $B --preheat 473.15K
refuse 'from with text' 2 'csv or json, not text' -- track --from x.csv --format text
# A table: own columns survive, order is kept, failing rows say why and the run goes on.
cat >in.csv <<'C'
sample,alloy,power_W,speed_mm_per_s,d4sigma_um,layer_um,hatch_um,width_um,remark
a1,316L,200,800,80,40,110,121.5,"a comma, a ""quote"""
a2,316L,-3,800,80,40,110,,negative
a3,Ti-6Al-4V,150,750,100,30,100,,
a4,unobtainium,150,750,100,30,100,,
a5,316L,two,750,100,30,100,,
a6,316L,20,2000,140,,,,cold
C
expect 'table with failing rows' 1 '^sample,alloy,power_W,.*,width_um,remark,preheat_C,width_um_predicted
^a1,316L,200,800,80,40,110,121.5,"a comma, a ""quote""",20,1[0-9][0-9]\.
^a2,.*bad-value: power -3 W is outside
^a3,Ti-6Al-4V,.*nominal
^a4,.*not-found:
^a5,.*bad-value: power_W .two. is not a number
^a6,.*no-melt$' '3 of 6 rows could not be evaluated' -- track --from in.csv
[ "$(wc -l <out)" -eq 7 ] && pass 'one row a row' || fail 'one row a row' "$(wc -l <out)"
expect 'table as json' 1 '"sample": "a1"
"width_um": "121.5"
"width_um_predicted": 1[0-9][0-9]\.
"made_by": {"program"' '3 of 6' -- track --from in.csv --format json
shell 'table from standard input' 1 '^a1,316L' '' "'$program' track --from - --quiet <in.csv"
printf 'power_W,speed_mm_per_s\n200,800\n' >short.csv
expect 'options fill what the table lacks' 0 '^200,800,110,40,80,20,1[0-9][0-9]\.' - -- track --from short.csv --alloy 316L --d4sigma 80 --hatch 110 --layer 40
printf 'power_W,speed_mm_s,spot_um,hatch\n200,800,80,100\n' >slips.csv
expect 'slips in column names are pointed out' 3 - 'column "speed_mm_s" is not recognised and passed through; did you mean speed_mm_per_s?
did you mean d4sigma_um (the 1/e2 diameter)?
did you mean hatch_um?
neither a column speed_mm_per_s nor an option gives the speed' -- track --from slips.csv --alloy 316L
printf 'power_W,power_W\n1,2\n' >twice.csv
refuse 'column twice' 3 'twice.csv:1: column "power_W" stands twice' -- track --from twice.csv
printf 'power_W;speed_mm_per_s\n200;0,8\n' >semi.csv
refuse 'semicolons' 3 'separated by semicolons; save it with commas' -- track --from semi.csv
printf '\357\273\277power_W,speed_mm_per_s\n200,800\n' >bom.csv
refuse 'byte order mark' 3 'byte order mark' -- track --from bom.csv
: >empty.csv
refuse 'empty table' 3 'empty' -- track --from empty.csv
refuse 'no such table' 3 'nowhere.csv: cannot be opened' -- track --from nowhere.csv
printf 'power_W,speed_mm_per_s\n200,800,1\n200,800\n"200,800\n' >ragged.csv
expect 'ragged rows go on' 1 '^200,800,.*bad-file: .*3 fields, but the header has 2
^200,800,,0,80,20,1[0-9][0-9]\.' '2 of 3 rows' -- track --from ragged.csv --alloy 316L --d4sigma 80
printf 'power_W,speed_mm_per_s\r\n200,800\r\n' >crlf.csv
expect 'CRLF' 0 '^200,800,,0,80,20,1[0-9][0-9]\.' - -- track --from crlf.csv --alloy 316L --d4sigma 80
# Reference pools through the program, constants as they stand; high-precision rows, SI to trade units by awk.
awk -F, 'BEGIN { OFMT = CONVFMT = "%.17g"; print "id,power_W,speed_mm_per_s,d4sigma_um,absorptivity,conductivity_W_per_mK,density_kg_per_m3,heat_capacity_J_per_kgK,melting_point_K,preheat_C,want_width,want_depth,want_length,want_peak" }
    NR > 1 { print $1, $2, $3 * 1e3, $4 * 1e6, $5, $6, $7, $8, $10, $9 - 273.15, $32, $33, $34, $30 }' OFS=, "$root/tests/data/gaussian_pools.csv" >ref.csv
"$program" track --from ref.csv --model gaussian --quiet >got.csv 2>err
awk -F, 'function off(a, b) { return (a - b) / b < 0 ? (b - a) / b : (a - b) / b }
    NR == 1 { for (i = 1; i <= NF; i++) at[$i] = i; next }
    { n++; e = off($at["peak_temperature_K"], $at["want_peak"]); if (e > worst) worst = e
      if ($at["want_width"] == "") next
      e = off($at["width_um"], $at["want_width"] * 1e6); if (e > worst) worst = e
      e = off($at["depth_um"], $at["want_depth"] * 1e6); if (e > worst) worst = e
      e = off($at["length_um"], $at["want_length"] * 1e6); if (e > worst) worst = e }
    END { printf "%d rows, worst relative error %g\n", n, worst; exit !(n >= 40 && worst < 1e-7) }' got.csv >out && pass "gaussian reference rows through the table" || fail 'gaussian reference rows' ''
awk -F, 'BEGIN { OFMT = CONVFMT = "%.17g"; print "id,power_W,speed_mm_per_s,d4sigma_um,absorptivity,conductivity_W_per_mK,density_kg_per_m3,heat_capacity_J_per_kgK,melting_point_K,preheat_C,want_width,want_length" }
    NR > 1 { print $1, $2, $3 * 1e3, $4 * 1e6, $5, $6, $7, $8, $10, $9 - 273.15, $24, $26 }' OFS=, "$root/tests/data/rosenthal_pools.csv" >ref.csv
"$program" track --from ref.csv --model rosenthal --quiet >got.csv 2>err
awk -F, 'function off(a, b) { return (a - b) / b < 0 ? (b - a) / b : (a - b) / b }
    NR == 1 { for (i = 1; i <= NF; i++) at[$i] = i; next }
    { n++; e = off($at["width_um"], $at["want_width"] * 1e6); if (e > worst) worst = e
      e = off($at["depth_um"], $at["want_width"] * 5e5); if (e > worst) worst = e
      e = off($at["length_um"], $at["want_length"] * 1e6); if (e > worst) worst = e }
    END { printf "%d rows, worst relative error %g\n", n, worst; exit !(n >= 30 && worst < 1e-10) }' got.csv >out && pass "rosenthal reference rows through the table" || fail 'rosenthal reference rows' ''
# More rows than a batch holds, on one thread and several: the same bytes, all rows, in order.
awk 'BEGIN { print "n,power_W,speed_mm_per_s,hatch_um,layer_um"; for (i = 1; i <= 1100; i++) printf "%d,%d,%d,%d,%d\n", i, 80 + i % 37 * 10, 300 + i % 53 * 30, 80 + i % 5 * 10, 30 + i % 3 * 10 }' >many.csv
for t in 1 2 5; do "$program" track --from many.csv --alloy 718 --d4sigma 80 --threads $t --quiet >many$t.csv; done
cmp -s many1.csv many2.csv && cmp -s many1.csv many5.csv && pass 'table: same bytes on any number of threads' || fail 'table: same bytes on any number of threads' ''
[ "$(tail -n +2 many1.csv | cut -d, -f1 | tr '\n' ' ')" = "$(seq -s ' ' 1 1100) " ] && pass 'table: every row once, in order' || fail 'table: every row once, in order' ''
printf 'power_W,speed_mm_per_s\n,800\n' >gap.csv
expect 'an empty power is called missing' 1 'bad-value: power is missing' '1 of 1 rows' -- track --from gap.csv --alloy 316L --d4sigma 80
for n in 2 7; do
    rm -f parts.csv
    for i in $(seq 1 $n); do "$program" track --from many.csv --alloy 718 --d4sigma 80 --quiet --shard $i/$n >>parts.csv; done
    cmp -s many1.csv parts.csv && pass "table in $n parts" || fail "table in $n parts" ''
done
refuse 'part of one setting' 2 'shard goes with --from' -- track $B --shard 1/2
refuse 'part of standard input' 2 'cannot be counted' -- track --from - --shard 1/2
refuse 'table without a file' 3 'nowhere.csv' -- track --from nowhere.csv --shard 1/2
