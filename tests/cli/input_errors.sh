# A mesh that cannot be used ends in 3.
try() {
    "$@"
    echo "$*: $?"
}
echo nothing >text.obj
printf 'o total\nv 0 0 0\nv 0 1 0\nv 0 0 1\nf 1 2 3\n' >total.obj
: >empty.obj
: >empty.stl
mkdir folder
for mesh in empty.obj empty.stl folder; do
    try roadglint sweep $mesh --freq 77GHz --az 0
    try roadglint inspect $mesh
done
try roadglint sweep none.obj --freq 77GHz --az 0
try roadglint sweep --freq 77GHz --az 0 -- -none.obj
try roadglint sweep text.obj --freq 77GHz --az 0 --quiet
try roadglint sweep total.obj --freq 77GHz --az 0 --quiet --parts
