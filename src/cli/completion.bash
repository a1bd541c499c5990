# bash completion for roadglint: commands and options come from the program itself
_roadglint() {
    local word=${COMP_WORDS[COMP_CWORD]} previous=${COMP_WORDS[COMP_CWORD-1]}
    if [ "$COMP_CWORD" = 1 ]; then
        mapfile -t COMPREPLY < <(compgen -W "$(roadglint help --words 2>/dev/null)" -- "$word")
    elif [ "${COMP_WORDS[1]}" = help ]; then
        mapfile -t COMPREPLY < <(compgen -W "$(roadglint help --words 2>/dev/null | grep -v '^-')" -- "$word")
    else
        case "$previous" in
            --units) mapfile -t COMPREPLY < <(compgen -W "m cm mm in ft" -- "$word"); return ;;
            --up | --front) mapfile -t COMPREPLY < <(compgen -W "x -x y -y z -z" -- "$word"); return ;;
        esac
        case "$word" in
            -*) mapfile -t COMPREPLY < <(compgen -W "$(roadglint help --words "${COMP_WORDS[1]}" 2>/dev/null)" -- "$word") ;;
            *) mapfile -t COMPREPLY < <(compgen -f -- "$word") ;;
        esac
    fi
}
complete -o filenames -F _roadglint roadglint
