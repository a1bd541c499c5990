# A job file gives the table that the command line gives, and the command line wins.
roadglint shape plate --width 10mm --height 10mm --out plate.obj 2>/dev/null
cat >job.yaml <<'END'
# two frequencies
freq: 76GHz,77GHz
az: >
  -3, 0,
  5:10:5
units: m
complex: true
quiet: true
END
roadglint sweep plate.obj --freq 76GHz,77GHz --az '-3, 0, 5:10:5' --units m --complex --quiet >line
roadglint sweep plate.obj --job job.yaml >job && cmp line job && echo same
roadglint sweep plate.obj --freq 77GHz --az 0 --units m --quiet >line
roadglint sweep plate.obj --az 0 --job=job.yaml --complex=false --freq 77GHz >job && cmp line job && echo same
{ printf 'freq: 77GHz\nquiet: true\naz: '; seq -s, 0 0.01 300; } >long.yaml
roadglint sweep plate.obj --job long.yaml | grep -vc '^#'
