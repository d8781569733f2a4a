# The program itself: help, version, unknown words, options.
B='--alloy 316L --d4sigma 80 --power 200 --speed 800'
expect version 0 '^meltwright [0-9]*\.[0-9]*\.[0-9]*$' - -- --version
expect help 0 'usage: meltwright COMMAND
card .*list, show
Exit: 0 done' - -- --help
expect 'help by letter' 0 'usage: meltwright COMMAND' - -- -h
shell 'bare call' 2 - 'meltwright track --alloy' "'$program'"
refuse 'unknown command' 2 "unknown command 'trakc'; did you mean 'track'" -- trakc
refuse 'unknown command far off' 2 "unknown command 'zzzzz' (see" -- zzzzz
for c in card track sweep map; do
    expect "$c help" 0 "usage: meltwright $c
options:
examples:
default: 20" - -- $c --help
done
expect 'help shows units and defaults' 0 'beam diameter as D4sigma
default: 0, bare plate
plate temperature; C or K \[default: 20\]' - -- track --help
refuse 'unknown option' 2 'unknown option --pwoer; did you mean --power?' -- track --pwoer 200
refuse 'unknown option far off' 2 'unknown option --zebra (see' -- track --zebra 200
refuse 'unknown letter' 2 'unknown option -z' -- track -z
refuse 'option of another command' 2 "contours is no option of 'track'" -- track --contours width
refuse 'missing value' 2 'power needs a value' -- track --power
refuse 'missing value before an option' 2 'power needs a value' -- track --power --speed 800
refuse 'flag with a value' 2 'force takes no value' -- track --force=yes
refuse 'option twice' 2 'power is given twice' -- track --power 200 --power 300
refuse 'stray word' 2 "'banana' is no option" -- track $B banana
expect 'equals sign' 0 'melt pool' - -- track --alloy=316L --d4sigma=80um --power=0.2kW --speed=0.8m/s
refuse 'bare spot' 2 'spot does not say which size is meant; use one of --d4sigma, --fwhm, --radius-1e2 or --diameter-1e2' -- track --spot 80
refuse 'bare beam' 2 'beam does not say which size' -- sweep --beam 80
refuse 'no beam' 2 'the beam is missing: exactly one of' -- track --alloy 316L --power 200 --speed 800
refuse 'two beams' 2 'd4sigma and --fwhm both give the beam' -- track $B --fwhm 47
refuse 'no power' 2 'power is missing' -- track --alloy 316L --d4sigma 80 --speed 800
refuse 'no speed' 2 'speed is missing' -- track --alloy 316L --d4sigma 80 --power 200
refuse 'no alloy' 2 'an alloy is needed, or absorptivity' -- track --d4sigma 80 --power 200 --speed 800
refuse 'default model without an alloy' 2 'default model needs an alloy' -- track --d4sigma 80 --power 200 --speed 800 --absorptivity 0.35 --conductivity 27 --density 6900 --heat-capacity 790 --melting-point 1730
# Wrong units, numbers that are none, values out of reason.
refuse 'wrong power unit' 3 "power: unit 'mW' in '200mW' is not one of: W, kW" -- track --alloy 316L --d4sigma 80 --power 200mW --speed 800
refuse 'wrong speed unit' 3 "speed: unit 'm/min' in '48m/min' is not one of: mm/s, m/s" -- track --alloy 316L --d4sigma 80 --power 200 --speed 48m/min
refuse 'wrong length unit' 3 "d4sigma: unit 'in'" -- track --alloy 316L --d4sigma 0.003in --power 200 --speed 800
refuse 'wrong temperature unit' 3 "preheat: unit 'F'" -- track $B --preheat 200F
refuse 'not a number' 3 "power: 'nan' is not a number" -- track --alloy 316L --d4sigma 80 --power nan --speed 800
refuse 'infinite' 3 "power: 'inf' is not a number" -- track --alloy 316L --d4sigma 80 --power inf --speed 800
refuse 'decimal comma' 3 'write decimals with a point' -- track --alloy 316L --d4sigma 80 --power 200 --speed 0,8m/s
refuse 'negative power' 3 'power -200 W is outside what can be right: 1 to 5000 W' -- track --alloy 316L --d4sigma 80 --power -200 --speed 800
refuse 'speed of the wrong magnitude' 3 'speed 800000 mm/s is outside what can be right' -- track --alloy 316L --d4sigma 80 --power 200 --speed 800m/s
refuse 'layer of the wrong magnitude' 3 'layer 30000 um is outside what can be right' -- track $B --hatch 100 --layer 30mm
refuse 'preheat above the solidus' 3 'preheat 1500 C is outside what the card of 316L allows' -- track $B --preheat 1500
refuse 'absorptivity above one' 3 'absorptivity 35 is outside 0.001 to 1' -- track $B --absorptivity 35
refuse 'beam uncertainty out of reason' 3 'beam-uncertainty 120 is outside 0 to 100 percent' -- track $B --beam-uncertainty 120
refuse 'unknown alloy' 3 'did you mean "316L"' -- track --alloy 361L --d4sigma 80 --power 200 --speed 800
refuse 'unknown model' 3 "model: 'gausian' is not default, gaussian or rosenthal; did you mean gaussian?" -- track $B --model gausian
refuse 'unknown format' 3 "format: 'jsn' is not text, csv or json; did you mean json?" -- track $B --format jsn
refuse 'alloy file that is not there' 3 'no-such.json' -- track --alloy no-such.json --d4sigma 80 --power 200 --speed 800
for t in 0 -1 2.5 x 5000; do refuse "threads $t" 3 'threads' -- sweep $B --threads $t; done
# The other spellings of an alloy, and doubt about the beam.
for a in 'alloy 718' N07718 '2.4668'; do expect "alloy as $a" 0 '^718 ' - -- card show "$a"; done
expect 'a doubtful beam' 0 'depth .* to  2[0-9][0-9] um' - -- track $B --beam-uncertainty 50
# Every beam form is the same beam: FWHM = 0.5887 D4sigma of a Gaussian (ISO 11146-1 for D4sigma).
for b in '--d4sigma 80' '--diameter-1e2 80' '--radius-1e2 40' '--radius-1e2 0.04mm' '--fwhm 47.09640090061899'; do
    expect "beam as $b" 0 '^200,800,,0,\(80\|79.99999999999[0-9]*\|80.00000000000[0-9]*\),20,1[0-9][0-9]\.' - -- track --alloy 316L $b --power 200 --speed 800 --format csv
done
# Examples of every help text, as printed.
for c in card track sweep map; do
    "$program" $c --help | sed -n '/^examples:/,$s/^  meltwright //p' >examples
    n=0
    while IFS= read -r line; do
        n=$((n + 1))
        shell "example $n of $c" 0 '' '' "'$program' $line --quiet"
    done <examples
    [ "$n" -ge 3 ] && pass "$c has examples" || fail "$c has examples" "$n found"
done
rm -f alloy.schema.json window.csv* map.*
