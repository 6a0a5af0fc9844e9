#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# follows and check. Answers from outside:
#   alternative: flexible, Moufang   Schafer, An Introduction to Nonassociative Algebras, III
#   Jordan: not associative          textbook
#   the examples of data/crosses     data/reference/candidates.csv: recomputed only
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"

python=$(command -v python3 || true)

cat >alternative.pres <<'END'
operation a*b
define ass(a,b,c) = (a*b)*c - a*(b*c)
identity left: ass(a,a,b) = 0
identity right: ass(a,b,b) = 0
candidate flexible: ass(a,b,a) = 0
candidate moufang: (a*x)*(y*a) = (a*(x*y))*a
candidate assoc: ass(a,b,c) = 0
candidate ass(a,b,c) = -ass(b,a,c)
END

# ---- answers -----------------------------------------------------------------------------

run 1 follows alternative.pres --all --format csv
is_empty err
[ "$(cut -d , -f 1-3 out | paste -s -d ' ')" = "candidate,degree,follows flexible,3,yes \
moufang,4,yes assoc,3,no #4,3,yes" ] || complain "$last: $(cat out)"
[ "$(head -n 1 out)" = "candidate,degree,follows,certainty" ] || complain "$last: $(head -n 1 out)"
tail -n +2 out | cut -d , -f 4 | grep -qvE '^(exact|2\^-[0-9]+)$' && complain "$last: $(cat out)"
run 0 follows alternative.pres --candidate moufang
has out "moufang follows (wrong with probability at most 2^-"
run 0 follows alternative.pres --candidate '#4' --format csv
run 1 follows alternative.pres --candidate assoc --format json
has out '"assoc fails for": ["1+1+1"]'
[ -z "$python" ] || "$python" -m json.tool <out >json || complain "$last: not JSON"
printf 'candidate assoc: (a*b)*c = a*(b*c)\ncandidate zero: a*b = b*a\n' >>jordan.pres
run 1 follows jordan.pres --candidate assoc
has out "assoc does not follow (proved)."
run 0 follows jordan.pres --candidate zero --proof zero.proof
has out "zero follows (proved)."
run 0 check zero.proof
has zero.proof 'candidate zero: a*b = a*b'
printf 'operation a*b\nidentity (a*b)*c\ncandidate only: (a*b)*c\n' >only.pres
run 0 follows only.pres --proof only.proof --witness only.witness
has out 'only follows (proved).'
is err 'idspan: no file for --witness was written: only follows'
run 0 check only.proof
has out 'The derivation, of 1 term,'
printf 'operation a*b commutative\ncandidate only: (a*b)*c\n' >only.pres
run 1 follows only.pres --proof other.proof
has out 'only fails for: 3, 2+1'
is err 'idspan: no file for --proof was written: only does not follow'
[ ! -e other.proof ] || complain "$last: a proof of what does not follow"

while IFS=, read -r file candidate degree follows _; do
    [ "$file" != file ] || continue
    status=0
    [ "$follows" = yes ] || status=1
    rm -f proof witness
    run $status follows "$source_dir/data/$file" --candidate "$candidate" --format csv \
        --proof proof --witness witness
    [ "$(tail -n 1 out)" = "$candidate,$degree,$follows,exact" ] || complain "$last: $(cat out)"
    if [ "$follows" = yes ]; then
        [ ! -e witness ] || complain "$last: a witness for what follows"
        run 0 check proof --format csv
    else
        [ ! -e proof ] || complain "$last: a proof of what does not follow"
        run 0 check witness --format csv
    fi
    [ "$(tail -n 1 out | cut -d , -f 1-3)" = "$candidate,$degree,$follows" ] ||
        complain "$last: $(cat out)"
done <"$source_dir/data/reference/candidates.csv"

# ---- files -------------------------------------------------------------------------------

run 0 follows alternative.pres --candidate flexible --proof flexible.proof
has out "flexible follows (proved)."
run 0 check flexible.proof
is_empty err
has out "Verified: the candidate flexible of degree 3 follows."
run 0 check - --format csv <flexible.proof
run 1 follows alternative.pres --candidate assoc --witness assoc.witness
run 0 check assoc.witness
has out "Verified: the candidate assoc of degree 3 does not follow."
run 0 follows alternative.pres --candidate moufang --proof moufang.tex --format latex
grep -q '\\begin{eqnarray\*}' moufang.tex || complain "$last: $(head moufang.tex)"
# A plain article has room for it.
if command -v pdflatex >/dev/null; then
    printf 'candidate c: ((((x*x)*x)*x)*x)*x = ((x*x)*x)*((x*x)*x)\n' >>jordan.pres
    run 0 follows jordan.pres --candidate c --proof sixth.tex --format latex
    for name in moufang sixth; do
        printf '\\documentclass{article}\\begin{document}\\input{%s}\\end{document}\n' $name \
            >article-$name.tex
        pdflatex -interaction=nonstopmode article-$name.tex >latex.log 2>&1 ||
            complain "$name.tex does not compile: $(grep '^!' latex.log)"
        ! grep -q 'Overfull' latex.log || complain "$name.tex: $(grep Overfull latex.log)"
    done
fi
run 2 check moufang.tex
has err "moufang.tex:1:1: expected \"idspan proof 1\""

# ---- algebras ------------------------------------------------------------------------------

run 1 follows alternative.pres --candidate assoc --algebra assoc.alg --witness assoc.witness
has out "assoc does not follow (proved)."
run 0 check assoc.alg
is_empty err
has out "Verified: the candidate assoc of degree 3 does not follow. The identities hold in the"
run 0 check assoc.alg --format csv
[ "$(tail -n 1 out | cut -d , -f 1-4)" = "assoc,3,no,2" ] || complain "$last: $(cat out)"
run 1 follows alternative.pres --candidate assoc --algebra other.alg
cmp -s assoc.alg other.alg || complain "the same search gave two algebras"
run 0 follows alternative.pres --candidate flexible --algebra flexible.alg
is err 'idspan: no file for --algebra was written: flexible follows'
[ ! -e flexible.alg ] || complain "$last: an algebra against what follows"
run 1 follows alternative.pres --candidate assoc --algebra assoc.tex --format latex
grep -q '\\begin{eqnarray\*}' assoc.tex || complain "$last: $(head assoc.tex)"
run 3 follows alternative.pres --candidate assoc --algebra none.alg --dimension 2 --steps 1000
has err "no algebra was written: no counterexample of dimension at most 2"
has out "assoc does not follow (wrong with probability at most"
[ ! -e none.alg ] || complain "$last: a file all the same"
run 2 follows alternative.pres --candidate assoc --dimension 3
has err "are limits of --algebra FILE"
run 2 follows alternative.pres --candidate assoc --algebra a.alg --dimension 256
has err "--dimension wants a whole number from 1 to 255"
run 2 follows alternative.pres --candidate assoc --algebra a --witness a
has err "--algebra and --witness name the same file"
sed 's/ = -\?e7$/ = e6/' assoc.alg >bad
run 2 check bad
has err "the mark at the end does not fit the file"

# Lines that end in carriage return and line feed are the same lines.
for file in flexible.proof assoc.witness assoc.alg; do
    sed 's/$/\r/' $file >crlf
    run 0 check crlf
done
# The proof in the manual, with the mark that it is told.
sed -n '/^idspan proof 1$/,/^end MARK$/p' "$source_dir/tools/idspan/idspan.5" |
    sed '$d' >manual.proof
run 2 check manual.proof
grep -o 'end [0-9a-f]\{16\}' err >mark
cat mark >>manual.proof
run 0 check manual.proof
has out 'Verified: the candidate sum of degree 3 follows.'
# A file that somebody wrote lacks the last line, and is told what it is.
for file in flexible.proof assoc.witness assoc.alg; do
    sed '$d' $file >hand
    run 2 check hand
    has err "ends in the line \"$(tail -n 1 $file)\""
done
sed 's/^terms 2/terms 3/' flexible.proof >bad
run 2 check bad
has err "the mark at the end does not fit the file"
is_empty out
head -c 100 flexible.proof >bad
run 2 check bad
: >bad
run 2 check bad
has err "bad:1:1: the file ends too early"
run 2 check nowhere.proof
has err "there is no file"

# ---- the command line --------------------------------------------------------------------

run 2 follows alternative.pres
has err "has 4 candidates: ask for --all, or choose one with --candidate, of flexible, moufang,"
run 2 follows alternative.pres --candidate xyzzy
has err 'it has flexible, moufang, assoc, #4'
run 2 follows alternative.pres --candidate flexibel
has err "did you mean \"flexible\"?"
run 2 follows alternative.pres --candidate x --all
has err "exclude each other"
run 2 follows alternative.pres --all --proof p
has err "exclude each other"
run 2 follows commutative.pres --all
has err "has no candidates"
run 2 follows alternative.pres --candidate flexible --proof alternative.pres
has err '--proof would overwrite "alternative.pres", the file that is read'
run 2 follows alternative.pres --candidate assoc --witness ./alternative.pres
has err '--witness would overwrite'
run 2 follows alternative.pres --candidate assoc --output w --witness w
has err '--output and --witness name the same file'
run 2 follows alternative.pres --candidate flexible --proof /nowhere/p
has err "cannot write"
run 2 check
has err "wants a proof, witness or algebra file"

finish
