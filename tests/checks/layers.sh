#!/bin/sh
# Storeys: a file includes only headers of its own or a lower storey; model and criteria keep clear of stdio, allocation, clock, locale.
# usage: layers.sh BUILD PROGRAM   (both unused: it reads sources)
set -u
awk '
BEGIN {
    n = split("base material model criteria study present cli generate", name, " ")
    for (i = 1; i <= n; i++) rank[name[i]] = i
    # public headers belong to the storey that implements them
    split("version:base status:base text:base units:base pool:base alloy:material rosenthal:model gaussian:model keyhole:model criteria:criteria study:study survey:study table:present track_text:present mapplot:present parityplot:present", pair, " ")
    for (i in pair) { split(pair[i], p, ":"); home[p[1]] = p[2] }
}
FNR == 1 { split(FILENAME, part, "/"); me = FILENAME ~ /^include/ ? home[substr(part[3], 1, length(part[3]) - 2)] : part[2]; files++
    if (!(me in rank)) { print "not ok " FILENAME ": no storey known for it"; bad++ } }
/^[ \t]*#[ \t]*include[ \t]*"/ {
    split($0, q, "\""); path = q[2]; split(path, s, "/")
    if (path ~ /^[a-z_]*_data\.h$/) next # generated
    other = s[1] == "meltwright" ? home[substr(s[2], 1, length(s[2]) - 2)] : s[1]
    if (!(other in rank)) { print "not ok " FILENAME ":" FNR ": " path " has no storey"; bad++ }
    else if (rank[other] > rank[me]) { print "not ok " FILENAME ":" FNR ": " me " reaches up to " path; bad++ }
}
(me == "model" || me == "criteria") && /#[ \t]*include[ \t]*<(stdio|stdlib|time|locale|pthread|unistd)\.h>/ {
    print "not ok " FILENAME ":" FNR ": " me " must stay pure: " $0; bad++ }
END { if (files < 20) { print "not ok only " files " files seen"; bad++ }
      if (!bad) print "ok " files " files keep to their storeys"; exit bad > 0 }
' src/*/*.c src/*/*.h include/meltwright/*.h
