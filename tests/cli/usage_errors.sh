# Wrong usage ends in 2, and the message says what would be right.
roadglint shape plate --width 1m --height 1m --out plate.obj 2>/dev/null
sweep() {
    roadglint sweep "$@"
    echo "sweep $*: $?"
}
roadglint swep
echo "swep: $?"
roadglint xyz
echo "xyz: $?"
roadglint help shapes
echo "help shapes: $?"
sweep
sweep plate.obj
sweep plate.obj --freq 77GHz
sweep plate.obj plate.obj --freq 77GHz --az 0
sweep plate.obj --freq
sweep plate.obj --freq ''
sweep plate.obj --freq=
sweep plate.obj --frequency 77GHz
sweep plate.obj --fre 77GHz
sweep plate.obj -q
sweep plate.obj --none
sweep plate.obj --quiet=maybe
sweep plate.obj --freq 77
sweep plate.obj --freq 77mm --az 0
sweep plate.obj --freq 77GHz,-1 --az 0
sweep plate.obj --freq 0 --az 0
sweep plate.obj --az 10:0:1
sweep plate.obj --az=-10:-20:0.5
sweep plate.obj --az 0:10
sweep plate.obj --az 0:10:0
sweep plate.obj --az 1,,2
sweep plate.obj --az "$(printf 'a\nb\033c')"
sweep plate.obj --az '0 5 10'
sweep plate.obj --az 0..10
sweep plate.obj -az 0
sweep plate.obj --freq 77GHz --az 0,2e6
sweep plate.obj --freq 77GHz --az 0 --el=-1e7
sweep plate.obj --bounces 1
sweep plate.obj --bounces 17
sweep plate.obj --pol hh,xx
sweep plate.obj --pol hh,
sweep plate.obj --mechanisms magic
sweep plate.obj --units parsec
sweep plate.obj --up w
sweep plate.obj --threads 0
sweep plate.obj --threads -2
sweep plate.obj --threads two
sweep plate.obj --out table.h5
sweep plate.obj --freq 1:1e7:1 --az 0:359:1e-4 --quiet
sweep plate.obj --freq 77GHz --az 0 --up x --front -x --quiet
