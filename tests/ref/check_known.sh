#!/bin/sh
# SPDX-License-Identifier: BSD-2-Clause
#
# check_known.sh IDSPAN_REF DIR
#
# Compares the slow reference program with values from outside that stand, with their sources, in
# the comments of the presentations in DIR:
#
#   # free: ...                dimensions of the free algebra in the degrees 1, 2, ...
#   # quotient: ...            dimensions modulo the identities; "quotient modulo P" for a prime P
#   # types: ...               number of association types in the degrees 1, 2, ...
#   # automorphisms N: ...     automorphism orders of the types of degree N, sorted
#   # group: ...               orders of the symmetry groups
#
# Each quotient of degree up to 5 with at most 150 monomials is computed over the rational numbers
# as well.
set -u
ref=$1
dir=$2
checks=0
failures=0

# compare WHAT EXPECTED GOT
compare()
{
    checks=$((checks + 1))
    if [ "$2" != "$3" ]; then
        failures=$((failures + 1))
        echo "FAILED $1: expected $2, got $3"
    fi
}

# joined SEPARATOR: lines of standard input in one line
joined()
{
    paste -s -d "$1" -
}

# length LIST: entries of a list with commas
length()
{
    echo "$1" | tr ',' '\n' | wc -l | tr -d ' '
}

check_file()
{
    file=$1
    grep -E '^# [a-z]+[a-z0-9 ]*: [0-9]' "$file" > "$work/facts"
    while IFS=: read -r key values; do
        key=${key#\# }
        values=${values# }
        n=$(length "$values")
        case $key in
        free)
            got=$("$ref" "$file" --basis "$n" | tail -n +2 | cut -d, -f2 | joined ,)
            ;;
        quotient)
            got=$("$ref" "$file" "$n" | tail -n +2 | cut -d, -f4 | joined ,)
            exact=$("$ref" "$file" "$n" --exact --limit 150 | tail -n +2 | cut -d, -f4 | joined ,)
            m=$(length "$exact")
            compare "$file $key over Q" "$(echo "$values" | cut -d, -f1-"$m")" "$exact"
            ;;
        'quotient modulo '*)
            got=$("$ref" "$file" "$n" --prime "${key##* }" | tail -n +2 | cut -d, -f4 | joined ,)
            ;;
        types)
            got=$(i=1; while [ "$i" -le "$n" ]; do
                    echo $(($("$ref" "$file" --types "$i" | wc -l) - 1))
                    i=$((i + 1))
                done | joined ,)
            ;;
        'automorphisms '*)
            got=$("$ref" "$file" --types "${key##* }" | tail -n +2 | sed 's/.*",//' | cut -d, -f1 |
                sort -n | joined ' ')
            ;;
        group)
            got=$("$ref" "$file" --group | tail -n +2 | awk -F, '{ print $(NF - 1) }' | joined ' ')
            ;;
        *)
            continue
            ;;
        esac
        compare "$file $key" "$values" "$got"
    done < "$work/facts"
}

work=$(mktemp -d)
trap 'rm -rf "$work"' EXIT
for file in "$dir"/*.pres; do
    check_file "$file"
done

# An argument order of odd order cannot change the sign.
echo 'operation {a,b,c} = -{b,c,a}' > "$work/zero.pres"
"$ref" "$work/zero.pres" --group 2> /dev/null
compare "contradictory signs" 2 $?
echo 'operation a*b
identity x*x = x*y' > "$work/mixed.pres"
"$ref" "$work/mixed.pres" 2 2> /dev/null
compare "not homogeneous" 2 $?

echo "$checks checks, $failures failures"
[ "$failures" -eq 0 ] && [ "$checks" -gt 40 ]
