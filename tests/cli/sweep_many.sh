# Ten thousand values in a list.
roadglint shape plate --width 10mm --height 10mm --out plate.obj 2>/dev/null
seq -s, 1 10000 >values
roadglint sweep plate.obj --freq 77GHz --az "$(cat values)" --quiet --out list.csv
roadglint sweep plate.obj --freq 77GHz --az 1:10000:1 --quiet --out range.csv
grep -v '^# az' list.csv >list
grep -v '^# az' range.csv >range
cmp list range && grep -vc '^#' list
