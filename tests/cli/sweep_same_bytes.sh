# What the numbers do not depend on changes no byte: threads, the output's name, where the mesh lies, --az LIST or --az=LIST.
mkdir folder
roadglint shape sphere --radius 50mm --sagitta 1mm --out folder/sphere.ply 2>/dev/null
cp folder/sphere.ply .
roadglint sweep sphere.ply --freq 76GHz:77GHz/3 --az -3,0:20:5 --complex >one 2>/dev/null
roadglint sweep folder/sphere.ply --quiet --complex=true --threads 1 --az=-3,0:20:5 --freq 24GHz --freq=76GHz:77GHz/3 --out two.csv
roadglint sweep --threads 3 --az=-3,0:20:5 --freq 76GHz:77GHz/3 --complex --quiet --out=- -- sphere.ply >three
cmp one two.csv && cmp one three && grep -vc '^#' one
# Rows of many parts by all mechanisms, from any number of threads.
roadglint shape guardrail --sagitta 2mm --out rail.obj 2>/dev/null
for n in 1 2 3 8; do
    roadglint sweep rail.obj --freq 24GHz,77GHz --az=-90:90:12.5 --el 0,3 --mechanisms surface,edge,bounce --pol hh,vv,hv,vh --parts --complex --quiet \
        --threads $n --out "rows of $n.csv"
    cmp "rows of 1.csv" "rows of $n.csv" && grep -vc '^#' "rows of $n.csv"
done
