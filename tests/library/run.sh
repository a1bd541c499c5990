#!/bin/sh
# What an installed library promises: the example builds through pkg-config and prints the published values, every header compiles by
# itself, and every exported name starts with rg_. Usage: run.sh SOURCE BUILD
set -eu
source=$1
build=$2
root=$(mktemp -d)
trap 'rm -rf "$root"' EXIT

DESTDIR=$root meson install -C "$build" --no-rebuild >"$root/log"
lib=$(dirname "$(find "$root" -name 'libroadglint.so')")
PKG_CONFIG_PATH=$lib/pkgconfig
PKG_CONFIG_SYSROOT_DIR=$root
export PKG_CONFIG_PATH PKG_CONFIG_SYSROOT_DIR

sanitize=
if nm -D "$lib/libroadglint.so" | grep -q __asan_init; then sanitize=-fsanitize=address,undefined; fi

# shellcheck disable=SC2046,SC2086  # words to be split
${CC:-cc} $sanitize "$source/docs/example/plate.c" $(pkg-config --cflags --libs roadglint) -lm -o "$root/plate"
LD_LIBRARY_PATH=$lib "$root/plate" >"$root/got"
# published: 4 pi A^2/lambda^2 (sin x/x)^2 cos^2, the square of W. B. Gordon, IEEE Trans. AP 23, 1975
cat >"$root/want" <<'END'
az  0.0 deg: HH  19.1855 dBsm
az  1.0 deg: HH   0.2774 dBsm
az  2.0 deg: HH  -0.1828 dBsm
az  5.0 deg: HH  -3.8330 dBsm
az 10.0 deg: HH -21.9965 dBsm
END
diff -u "$root/want" "$root/got"

for header in "$source"/include/roadglint/*.h; do
    echo "#include <roadglint/$(basename "$header")>" | ${CC:-cc} -std=c17 -Wall -Wextra -Werror -I"$source/include" -x c -fsyntax-only -
done

alien=$(nm -D --defined-only "$lib/libroadglint.so" | awk '$2 ~ /[A-Z]/ && $3 !~ /^rg_/ && $3 !~ /^_(init|fini)/ {print $3}')
if [ -n "$alien" ]; then
    echo "exported without rg_: $alien" >&2
    exit 1
fi
[ "$(nm -D --defined-only "$lib/libroadglint.so" | grep -c ' T rg_')" -ge 20 ]
# Every declared function is there, and no other.
grep -hv "^#" "$source"/include/roadglint/*.h | grep -o 'RG_API [^(]*(' | sed 's/.*[ *]\(rg_[a-z_0-9]*\)($/\1/' | sort -u >"$root/declared"
nm -D --defined-only "$lib/libroadglint.so" | awk '$2 == "T" && $3 ~ /^rg_/ {print $3}' | sort -u >"$root/exported"
diff -u "$root/declared" "$root/exported"
