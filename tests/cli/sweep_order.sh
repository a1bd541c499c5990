# Frequency fastest, then azimuth, then elevation; the total, then the parts. Numbers left out: they have tests of their own.
roadglint shape dihedral --width 100mm --height 100mm --out dihedral.obj 2>/dev/null
roadglint sweep dihedral.obj --freq 76GHz,77GHz --az=-10,20 --el -1:1/2 --parts --pol vh,hh --complex --quiet >table.csv
grep -v '^#' table.csv | cut -d, -f1-4
grep -v '^#' table.csv | head -1
