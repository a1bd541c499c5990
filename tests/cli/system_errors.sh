# What the system refuses ends in 4 and is named. What stood under the name is still there, and nothing else is.
roadglint shape plate --width 1m --height 1m --out plate.obj 2>/dev/null
mkdir folder.csv
try() {
    roadglint sweep plate.obj --quiet --freq 77GHz "$@"
    echo "$*: $?"
}
try --az 0 --out none/table.csv
try --az 0 --out folder.csv
roadglint sweep plate.obj --quiet --freq 77GHz --az 0 >/dev/full
echo "sweep: $?"
roadglint help >/dev/full
echo "help: $?"
{ { roadglint sweep plate.obj --quiet --freq 77GHz --az 0:359.9:0.1; echo "closed pipe: $?" >&3; } | :; } 3>&1
echo old >table.csv
(ulimit -f 1; trap '' XFSZ; try --az 0:359.9:0.1 --out table.csv)
cat table.csv
ls
