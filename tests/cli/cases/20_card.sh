# Cards at the command line.
expect 'card list' 0 '^316L .*UNS S31603
^Ti-6Al-4V
^718 
^625 
^AlSi10Mg' - -- card list
expect 'card show' 0 'solidus_K .*1675
averages from the tables
doi:10.1007' - -- card show 316L
expect 'card by designation' 0 '^718 ' - -- card show n07718
expect 'card by file' 0 '^316L ' - -- card show "$root/alloys/316L.json"
expect 'card show at a preheat' 0 'plate at 200 C' - -- card show Ti-6Al-4V --preheat 200
refuse 'card show too hot' 3 'is not below the solidus' -- card show 316L --preheat 2000
"$program" card show 316L --format json >shown.json
cmp -s shown.json "$root/alloys/316L.json" && pass 'card show as json is the file' || fail 'card show as json is the file' 'differs'
refuse 'card show as csv' 3 'text or json' -- card show 316L --format csv
for a in "$root"/alloys/*.json; do
    case $a in *.schema.json) continue ;; esac
    expect "card check $(basename "$a")" 0 'good, alloy' - -- card check "$a"
done
refuse 'card check of a bad card' 1 'wrong_unit.json:[0-9]*: ' -- card check "$root/tests/data/cards/wrong_unit.json"
refuse 'card check of no card' 1 'cannot be opened' -- card check nowhere.json
"$program" card schema >schema.json
cmp -s schema.json "$root/alloys/alloy.schema.json" && pass 'the committed schema is what the program prints' || fail 'schema' 'differs'
expect 'card schema alloy' 0 'json-schema.org' - -- card schema alloy
refuse 'card schema of something else' 2 'the word alloy' -- card schema banana
refuse 'card alone' 2 'what with the cards' -- card
refuse 'card typo' 2 "'shwo' is not list, show, check or schema; did you mean show?" -- card shwo 316L
refuse 'card show nothing' 2 'is followed by one NAME or FILE' -- card show
refuse 'card list too much' 2 'is followed by nothing' -- card list 316L
# A card of the shop's own, found by name through the environment, and before the one installed.
mkdir -p mine
sed 's/"name": "316L"/"name": "Lot 7"/' "$root/alloys/316L.json" >mine/lot7.json
shell 'own folder of cards' 0 'Lot 7' - "MELTWRIGHT_ALLOYS=nowhere:mine '$program' card list"
shell 'own card by name' 0 '^Lot 7' - "MELTWRIGHT_ALLOYS=mine '$program' track --alloy 'lot 7' --d4sigma 80 --power 200 --speed 800"
