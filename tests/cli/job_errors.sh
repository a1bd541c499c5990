# A job file that is wrong: the file and the key are named.
roadglint shape plate --width 10mm --height 10mm --out plate.obj 2>/dev/null
job() {
    printf '%b' "$1" >job.yaml
    roadglint sweep plate.obj --quiet --job job.yaml
    printf '%s: %d\n' "$1" $?
}
job 'frequ: 77GHz\n'
job 'frequency: 77GHz\n'
job 'colour: red\n'
job 'az: 10:0:1\n'
job 'freq:\n'
job 'quiet: yes\n'
job 'threads: 0\n'
job 'job: other.yaml\n'
job 'az: [0, 1]\n'
job 'az: 0\naz: 1\n'
job '- az\n'
job 'az: "0\n'
job 'az: 0\n'
mkdir folder
roadglint sweep plate.obj --job folder
echo "folder: $?"
roadglint sweep plate.obj --job none.yaml
echo "none: $?"
