# The man page reads without a complaint.
command -v man >/dev/null || exit 77
roadglint help --man >roadglint.1
man --warnings -E UTF-8 -l roadglint.1 >page || exit 1
grep -c '^EXIT STATUS' page
