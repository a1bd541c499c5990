# A line of progress shows on a terminal, not with --quiet, nor in a file.
command -v script >/dev/null || exit 77
roadglint shape plate --width 1m --height 1m --out plate.obj 2>/dev/null
sweep='roadglint sweep plate.obj --freq 77GHz --az 0:359.9:0.1 --out table.csv'
script -qec "$sweep" /dev/null >shown
grep -q '[0-9] of 3600 aspects, [0-9.e+]* a second, [0-9.]* [a-z]* left' shown && echo 'terminal: shown'
script -qec "$sweep --quiet" /dev/null >shown
[ -s shown ] || echo 'quiet: nothing'
$sweep 2>shown
grep -q 'of 3600' shown || echo 'file: nothing'
cat shown
