# What is allowed and hardly meant is told, and the table comes all the same: a forgotten unit, a decimal comma, bounces that nothing follows.
roadglint shape plate --width 100mm --height 100mm --out plate.obj 2>/dev/null
roadglint sweep plate.obj --freq 77 --az 0 | grep -c '^0,'
roadglint sweep plate.obj --freq 76,5GHz --az 0 | grep -c '^0,'
roadglint sweep plate.obj --freq 77GHz --az 0 --bounces 3 | grep -c '^0,'
roadglint sweep plate.obj --freq 77 --az 0 --bounces 3 --quiet | grep -c '^0,'
