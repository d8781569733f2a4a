# Outputs: whole or not at all, never over something that is there, and a failure is said.
S='--alloy 316L --d4sigma 80 --power 150:300:4 --speed 600:1200:3 --hatch 90 --layer 30 --quiet'
expect 'sweep to a file' 0 - - -- sweep $S -o w.csv
[ "$(wc -l <w.csv)" -eq 13 ] && pass 'file has all rows' || fail 'file has all rows' ''
grep -q '"command": "sweep"' w.csv.json && grep -q '"overlap_index_even_odds"' w.csv.json && pass 'provenance beside the table' || fail 'provenance beside the table' ''
refuse 'no overwriting' 4 'w.csv: exists already; --force replaces it' -- sweep $S -o w.csv
expect 'force overwrites' 0 - - -- sweep $S -o w.csv --force
expect 'output letter joined' 0 - - -- sweep $S -ow2.csv
cmp -s w.csv w2.csv && pass 'same file twice' || fail 'same file twice' ''
expect 'format by ending' 0 - - -- track --alloy 316L --d4sigma 80 --power 200 --speed 800 -o t.json
grep -q '"results"' t.json && pass 'json by ending' || fail 'json by ending' ''
refuse 'folder that is not there' 4 'no-such-folder/x.csv: cannot be written' -- sweep $S -o no-such-folder/x.csv
mkdir -p taken
refuse 'folder as a file' 4 'taken: is a folder' -- sweep $S -o taken --format csv
if [ "$(id -u)" -ne 0 ]; then
    mkdir -p locked; chmod a-w locked
    refuse 'folder without leave' 4 'cannot be written' -- sweep $S -o locked/x.csv
fi
[ -z "$(find . -name '*.part-*')" ] && pass 'no half-written file lies about' || fail 'no half-written file lies about' ''
for c in 'track --alloy 316L --d4sigma 80 --power 200 --speed 800' "sweep $S" 'card list' '--help' '--version'; do
    shell "full disk: $c" 4 - 'could not be written\|writing failed' "'$program' $c >/dev/full"
    shell "closed output: $c" 4 - 'could not be written\|writing failed' "'$program' $c >&-"
done
# A reader that goes away: no signal death, no backtrace.
shell 'closed pipe' 0 'power_W' '' "('$program' sweep --alloy 316L --d4sigma 80 --power 100:400:40 --speed 200:2000:40 --hatch 90 --layer 30 --quiet; echo \$? >rc) | head -n 1"
[ "$(cat rc)" -eq 4 ] && pass 'closed pipe ends with 4' || fail 'closed pipe ends with 4' "$(cat rc)"
# The locale has no say: with a decimal comma the same bytes.
"$program" sweep $S >plain.csv
for l in de_DE.UTF-8 fr_FR.UTF-8 tr_TR.UTF-8; do
    LC_ALL=$l "$program" sweep $S >other.csv 2>/dev/null
    cmp -s plain.csv other.csv && pass "locale $l" || fail "locale $l" ''
done
expect 'dash is standard output' 0 '^power_W' - -- track --alloy 316L --d4sigma 80 --power 200 --speed 800 --format csv -o -
refuse 'no name for the output' 2 'o needs the name of a file' -- track --alloy 316L --d4sigma 80 --power 200 --speed 800 -o ''
refuse 'a picture from track' 2 "pictures come from 'map'" -- track --alloy 316L --d4sigma 80 --power 200 --speed 800 -o x.png
refuse 'json into a csv file' 2 'does not go with a file that ends in .csv' -- sweep $S -o x.csv --format json
refuse 'format of a list of cards' 2 "goes with 'card show' alone" -- card list --format csv
# Ended in the middle of a write: nothing half-written stays behind.
for sig in INT TERM HUP; do
    env -i PATH="$PATH" sh -c "trap - INT; exec '$program' sweep --alloy 316L --d4sigma 80 --power 100:400:300 --speed 200:2000:300 --hatch 90:120:4 --layer 30:50:4 -o ended.csv --quiet" &
    pid=$!
    n=0
    while [ -z "$(find . -name 'ended.csv.part-*' -size +0)" ] && [ $n -lt 300 ]; do sleep 0.1; n=$((n + 1)); done
    kill -$sig $pid
    wait $pid 2>/dev/null
    [ -z "$(find . -name 'ended.csv*')" ] && pass "ended by $sig: nothing left" || fail "ended by $sig: nothing left" "$(find . -name 'ended.csv*')"
done
