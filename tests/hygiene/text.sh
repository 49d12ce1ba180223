#!/bin/sh
# The tree reads as one wants to find it: nothing further at the top, a licence line in every source file, no
# notes to self, no path of somebody's machine, no tabs, no long lines.
#
# Usage: text.sh ROOT
# SPDX-License-Identifier: GPL-3.0-or-later
set -u
cd "${1:?usage: text.sh ROOT}" || exit 2
files=$(mktemp) || exit 2
trap 'rm -f "$files"' EXIT
bad=0

complain() { # complain WHAT LINES
    [ -n "$2" ] || return 0
    echo "$1:"
    printf '%s\n' "$2" | head -n 40
    bad=1
}

if git rev-parse --git-dir >/dev/null 2>&1; then
    git ls-files -co --exclude-standard | while read -r f; do [ -f "$f" ] && echo "$f"; done >"$files"
else
    find . -name 'build*' -prune -o -type f -print | sed 's|^\./||' >"$files"
fi
[ "$(wc -l <"$files")" -gt 50 ] || { echo "text.sh: hardly a file found; is this the root?"; exit 2; }

top=$(sed 's|/.*||' "$files" | LC_ALL=C sort -u | grep -v '^\.' |
    grep -vxE 'README\.md|DEVELOPERS\.md|LICENSE|CMakeLists\.txt|sim|include|drivecycles|tests|docs')
complain "does not belong at the top" "$top"
for f in README.md DEVELOPERS.md LICENSE CMakeLists.txt; do
    [ -f "$f" ] || complain "missing" "$f"
done

sources=$(grep -E '\.(c|h|sh|py)$|^\.ci/' "$files" | grep -v '^tests/fuzz/corpus/')
own=$(grep -vE '^tests/fuzz/corpus/|^LICENSE$' "$files")

complain "no SPDX line" "$(printf '%s\n' "$sources" | xargs grep -L 'SPDX-License-Identifier: GPL-3\.0-or-later')"
words="TO""DO|FIX""ME|XX""X|HA""CK"
complain "notes to self" "$(printf '%s\n' "$own" | xargs grep -nwE "$words")"
place='(^|[^A-Za-z0-9_./-])/(home|root|work|Users|mnt|opt)/'
complain "a path of one machine" "$(printf '%s\n' "$own" | xargs grep -nE "$place")"
complain "tabs" "$(printf '%s\n' "$sources" | xargs grep -n "$(printf '\t')")"
complain "blanks at a line's end" "$(printf '%s\n' "$own" | grep -vE '\.csv$' | xargs grep -nE ' +$')"
complain "lines over 132 bytes" "$(printf '%s\n' "$sources" | xargs grep -nE '^.{133,}')"
complain "links to nowhere" "$(grep '\.md$' "$files" | while read -r page; do
    grep -oE '\]\([^):#]+' "$page" | sed 's/^](//' | while read -r link; do
        [ -e "$(dirname "$page")/$link" ] || echo "$page: $link"
    done
done)"
exit $bad
