# What bash offers for a line whose last word is being typed.
command -v bash >/dev/null || exit 77
touch saloon.obj
cat >offer.bash <<'END'
source "$1"
offer() {
    COMP_WORDS=("$@") COMP_CWORD=$(($# - 1)) COMPREPLY=()
    _roadglint
    printf '%s: %s\n' "$*" "${COMPREPLY[*]}"
}
offer roadglint s
offer roadglint --v
offer roadglint help in
offer roadglint sweep --fr
offer roadglint sweep --units c
offer roadglint sweep --up -
offer roadglint sweep salo
END
bash offer.bash "$HERE/../../src/cli/completion.bash"
