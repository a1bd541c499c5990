# The list of commands; then: every way to ask for a command's help says the same, and help, completion and man page have all its options.
roadglint help
for command in $(roadglint help --words | grep -v -e '^help$' -e '^--'); do
    roadglint help "$command" >help
    roadglint "$command" --help >flag
    roadglint "$command" some words -h >late
    cmp help flag && cmp help late && head -1 help | grep -q "^roadglint $command " && echo "$command: the same"
    roadglint help --man | sed 's/\\//g' >page
    roadglint help --words "$command" >words
    [ -s words ] || echo "$command: no options"
    while read -r option; do
        grep -q -e "^  $option " help || echo "$command $option: not in its help"
        grep -q -e "^.B $option" page || echo "$command $option: not in the man page"
    done <words
done
