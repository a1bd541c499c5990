# From a shape to a picture.
roadglint shape plate --width 10mm --height 20mm --out plate.ply
roadglint inspect plate.ply --freq 77GHz >report && grep -c . report >/dev/null && echo inspected
roadglint sweep plate.ply --freq 77GHz --az 0:359:1 --out table.csv
roadglint plot table.csv --out table.svg && head -c 5 table.svg && echo
ls
