# A cut of a table of many is the picture of that cut alone, whatever the order of the rows; and what is refused, by which words.
table() { echo "$1"; cat; }
header=az_deg,el_deg,freq_hz,part,sigma_hh_dbsm,sigma_vv_dbsm
mkdir all one turned
rows() {                                            # azimuth 0 to 90; two elevations, two frequencies, a part
    awk -v want="$1" 'BEGIN {
        for (az = 0; az <= 90; az += 5) for (el = 0; el <= 5; el += 5) for (f = 76; f <= 77; f++) for (p = 0; p < 2; p++) {
            row = az "," el "," f "500000000," (p ? "\"door, left\"" : "total") "," (-az / 3 + el + f % 5 - 7 * p) "," (-az / 2)
            if (want == "" || want == el "/" f "/" p) print row
        }
    }'
}
rows "" | table $header >all/t.csv
rows "" | sort -r | table $header >turned/t.csv
rows 5/77/0 | table $header >one/t.csv
same() { cmp "$1" "$2" && echo "$3"; }
roadglint plot one/t.csv --out one.svg && roadglint plot all/t.csv --el 5 --freq 77.5GHz --out cut.svg && same one.svg cut.svg "the cut"
roadglint plot turned/t.csv --el=5 --freq 77500MHz --out turned.svg && same one.svg turned.svg "rows in any order"
roadglint plot one/t.csv --pol hh --out hh.svg && if cmp -s one.svg hh.svg; then echo "VV is not there"; fi
roadglint plot all/t.csv --el 0 --freq 76.5GHz --part 'door, left' --out part.svg && if cmp -s one.svg part.svg; then echo "the part is not there"; fi
roadglint plot all/t.csv turned/t.csv --az 5 --freq 76.5GHz --out both.png && roadglint plot one/t.csv --kind polar --width 300 --out polar.pdf
refuse() { roadglint plot "$@" --out no.png; echo "exit $?"; }
refuse all/t.csv
refuse all/t.csv --el 0
refuse all/t.csv --el 4 --freq 76.5GHz
refuse all/t.csv --el 0 --freq 76.5GHz --part wheel
refuse one/t.csv --pol hv
refuse one/t.csv --min 3 --max=-3
refuse one/t.csv --kind round
refuse one/t.csv --width 20
refuse all/t.csv --az 5 --freq 76.5GHz --kind polar
refuse none.csv
sed 's/,-15$/,x/' one/t.csv >bad.csv
refuse bad.csv
refuse one/t.csv --out no.gif
ls
