#!/bin/sh
# Runs NAME.sh in an empty folder, and holds what it wrote and its exit code against NAME.stdout, NAME.stderr and NAME.exit beside it.
# @VERSION@ there stands for the program's version. Usage: run.sh ROADGLINT NAME
set -u
here=$(cd "$(dirname "$0")" && pwd)
roadglint=$(realpath "$1")
name=$2
folder=$(mktemp -d)
trap 'rm -rf "$folder"' EXIT
mkdir "$folder/work"
cd "$folder/work" || exit 99

LC_ALL=C TZ=UTC PATH=$(dirname "$roadglint"):$PATH HERE=$here BUILT=$(dirname "$roadglint")
export LC_ALL TZ PATH HERE BUILT
unset OMP_NUM_THREADS
# A sanitizer's build: what fontconfig keeps until the end is not ours. Leaks of the program itself still fail the case.
echo leak:libfontconfig >"$folder/suppressions"
LSAN_OPTIONS=suppressions=$folder/suppressions:print_suppressions=0
export LSAN_OPTIONS
timeout 100 sh "$here/$name.sh" >"$folder/stdout" 2>"$folder/stderr" </dev/null
code=$?
[ $code != 77 ] || exit 77                                  # something that the case needs is not here

version=$("$roadglint" --version | cut -d' ' -f2)
failed=0
for stream in stdout stderr; do
    sed "s/@VERSION@/$version/" "$here/$name.$stream" >"$folder/want"
    diff -u --label "$name.$stream" --label "what came" "$folder/want" "$folder/$stream" || failed=1
done
if [ "$code" != "$(cat "$here/$name.exit")" ]; then
    echo "$name: exit code $code, not $(cat "$here/$name.exit")"
    failed=1
fi
exit $failed
