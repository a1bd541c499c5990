# A sweep that is stopped ends in 130 soon, and leaves no file behind.
roadglint shape sphere --radius 0.3m --sagitta 0.1mm --out sphere.ply 2>/dev/null
for signal in INT TERM HUP; do
    echo old >table.csv
    roadglint sweep sphere.ply --freq 77GHz --az 0:359.99:0.01 --out table.csv 2>told &
    n=0
    while [ "$(find . -type f | wc -l)" -lt 4 ] && [ $n -lt 300 ]; do   # until the temporary file is there
        sleep 0.1
        n=$((n + 1))
    done
    begun=$(date +%s%N)
    kill -$signal $!
    wait $!
    code=$?
    [ $((($(date +%s%N) - begun) / 1000000)) -lt 1000 ] && soon='within a second' || soon='late'
    echo "$signal: $code $soon, $(grep -c 'roadglint sweep: interrupted after [0-9]* of 36000 aspects' told) line, $(cat table.csv)"
    ls
done
# A mesh of a million facets is still being read when the signal comes (on a machine that is faster than that, the sweep has begun).
rm told sphere.ply
roadglint shape sphere --radius 0.3m --sagitta 0.002mm --out sphere.obj 2>/dev/null
roadglint sweep sphere.obj --freq 77GHz --az 0:359.99:0.01 --quiet --out new.csv 2>told &
n=0
# Until it is no longer the shell's child, and listens for SIGINT.
until { grep -q roadglint "/proc/$!/comm" && grep -q '^SigCgt:.*[2367abef]$' "/proc/$!/status"; } || [ $n -ge 300 ]; do
    sleep 0.01
    n=$((n + 1))
done
kill -INT $!
wait $!
echo "reading: $? $(grep -c '^roadglint sweep: interrupted' told) line"
ls
