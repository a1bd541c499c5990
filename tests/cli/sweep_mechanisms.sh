# What the head says of mechanisms and bounces; columns in the order of hh, vv, hv, vh whatever the order asked for.
roadglint shape dihedral --width 100mm --height 100mm --out dihedral.obj 2>/dev/null
roadglint sweep dihedral.obj --freq 77GHz --az 7 --mechanisms bounce,surface,edge --pol vh,hv --quiet >"-all mechanisms.csv"
grep -e '^# mechanisms' -e '^# bounces' -e '^# pol' -e '^az' -- "./-all mechanisms.csv"
roadglint sweep dihedral.obj --freq 77GHz --az 7 --mechanisms surface,bounce --bounces 4 --quiet >four
roadglint sweep dihedral.obj --freq 77GHz --az 7 --mechanisms surface,bounce --quiet >as_it_comes
cmp four as_it_comes && echo 'four, as it comes'
roadglint sweep dihedral.obj --freq 77GHz --az 7 --mechanisms surface,bounce --bounces 2 --quiet | grep '^# bounces'
roadglint sweep dihedral.obj --freq 77GHz --az 7 --quiet | grep -c '^# bounces'
roadglint sweep dihedral.obj --freq 77GHz --az 7 --quiet --out=-table.CSV && ls -- -table.CSV
