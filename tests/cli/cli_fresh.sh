#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# fresh. Answers from outside:
#   special Jordan, degree 8     Glennie 1966: one module, of weight 3+3+2
#   octonions, degree 5          Racine 1988, dimensions recomputed
#   symmetrised pre-Lie          Bergeron, Loday, Proc. AMS 139 (2011): nothing
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"

python=$(command -v python3 || true)
models=$source_dir/data/models

# ---- tables ------------------------------------------------------------------------------

run 0 fresh "$models/special-jordan.pres" --model special --degree 8 --table --format csv
is_empty err
[ "$(head -n 1 out)" = "degree,partition,dimension,free,holding,consequences,fresh,certainty" ] ||
    complain "$last: $(head -n 1 out)"
[ "$(grep -v ,0,exact out | tail -n +2 | cut -d , -f 1-7 | paste -s -d ' ')" = \
    "8,3+3+2,42,147,129,128,1 8,total,,135135,116088,116046,42" ] || complain "$last: $(cat out)"
tail -n +2 out | cut -d , -f 8 | grep -qvE '^(exact|2\^-[0-9]+)$' && complain "$last: $(cat out)"
run 0 fresh "$models/special-jordan.pres" --model special --degrees 1..7 --table
has out "Nothing new holds in special."
lacks out "2^-"
run 0 fresh "$models/octonions.pres" --model octonions --degree 5 --table --format json
has out '"partition": "1+1+1+1+1"'
[ -z "$python" ] || "$python" -m json.tool <out >json || complain "$last: not JSON"
run 0 fresh "$models/octonions.pres" --model octonions --degree 5 --table --format latex
has out '\toprule'
run 0 fresh "$models/octonions.pres" --model octonions --degree 5 --table
has out "Degree 5: new in octonions are 3+2, 3+1+1, 2+2+1, 2+1+1+1 (2 times), 1+1+1+1+1."
run 0 fresh "$models/symmetrised-pre-lie.pres" --model symmetrised --degrees 2..4 --table
has out "Nothing new holds in symmetrised (each degree wrong with probability at most 2^-"

# ---- identities --------------------------------------------------------------------------

run 0 fresh "$models/octonions.pres" --model octonions --degrees 5..6 --save known.pres
has out "# 4: degree 6, adds 1+1+1+1+1+1; "
has out "identity octonions-6-1: "
has out " alternating a,b,c,d,e,f"
has known.pres "# degree 6; holds in the model octonions; adds 1+1+1+1+1+1"
mkdir -p algebras
cp "$source_dir/data/algebras/octonions.alg" .
sed 's,"../algebras/octonions.alg","octonions.alg",' known.pres >again.pres
run 0 fresh again.pres --model octonions --degrees 4..6
has out "Nothing new holds in octonions."
# What is printed can be pasted: the statements, with their line breaks, read like the saved ones.
run 0 fresh "$models/octonions.pres" --model octonions --degrees 5..6
sed -n '/^# 1:/,$p' out >pasted
{ sed 's,"../algebras/octonions.alg","octonions.alg",' "$models/octonions.pres" && cat pasted; } \
    >pasted.pres
run 0 fresh pasted.pres --model octonions --degrees 4..6
has out "Nothing new holds in octonions."
run 0 fresh "$models/sl-2.pres" --model sl2 --degree 5 --format json
has out '"sl2-5-1": "identity sl2-5-1: [[[a,b],[a,c]],a] = 0"'
[ -z "$python" ] || "$python" -m json.tool <out >json || complain "$last: not JSON"
run 0 fresh "$models/sl-2.pres" --model sl2 --degree 5 --format latex
has out '\toprule'
has out 'sl2-5-1'
run 0 fresh "$models/sl-2.pres" --model sl2 --degree 5 --format csv
lacks out 'sl2-5-1'
run 0 fresh "$models/sl-2.pres" --model sl2 --degree 5 --exact --table
has out "Degree 5: new in sl2 are 3+1+1, 2+1+1+1."
run 3 fresh "$models/octonions.pres" --model octonions --degree 7 --exact --table
has err "evaluations on all basis tuples"

printf 'operation a*b\nmodel only associative: a*b = a b\n' >other.pres
# ---- mistakes ----------------------------------------------------------------------------

# The only model need not be named; of several the names are listed.
run 0 fresh other.pres --degree 2 --table
has out 'Nothing new holds in only.'
printf 'model second associative: a*b = b a\n' >>other.pres
run 2 fresh other.pres --degree 2
has err 'other.pres has 2 models: choose one with --model, of only, second'
run 2 fresh other.pres --degree 2 --model xyzzy
has err 'it has only, second'
run 2 fresh "$models/octonions.pres" --model octonions
has err '"fresh" wants a degree'
run 2 fresh "$models/octonions.pres" --model octonion --degree 3
has err 'did you mean "octonions"?'
run 2 fresh "$models/octonions.pres" --model octonions --degree 3 --table --save x
has err "exclude each other"
run 2 fresh jordan.pres --model special --degree 3
has err 'write one as "model NAME associative: ..."'
printf 'operation a*b\nmodel m algebra "nowhere.alg"\n' >nowhere.pres
run 2 fresh nowhere.pres --model m --degree 3
has err 'nowhere.pres:2:7: the file "nowhere.alg" of the model m cannot be read: No such file'
has err 'model m algebra "nowhere.alg"'
printf 'operation a*b\nidentity flat: (a*b)*c = a*(b*c)\nmodel m associative: a*b = a b - b a\n' \
    >wrong.pres
run 2 fresh wrong.pres --model m --degree 3
has err 'wrong.pres:2:1: the identity flat does not hold in the model m'
has err 'identity flat: (a*b)*c = a*(b*c)'
mkdir other
printf 'operation a.b\nidentity a.b - b.a\n' >other/base.pres
printf 'operation a*b commutative\nmodel m over "base.pres": a*b = a.b\n' >other/good.pres
run 0 fresh other/good.pres --model m --degree 3 --table
has out "Nothing new"
printf 'operation a*b alternating\nmodel m over "base.pres": a*b = a.b\n' >other/odd.pres
run 2 fresh other/odd.pres --model m --degree 3
has err 'odd.pres:2:33: the polynomial does not have the symmetry'
printf 'operation a*b\nmodel m over "base.pres": a*b = a.b + [a,b]\n' >other/unknown.pres
run 2 fresh other/unknown.pres --model m --degree 3
has err 'unknown.pres:2:39: unknown operation [] with 2 arguments; expected an operation that is'
has err 'declared in "base.pres"'
has err '^'
# The user's own line, also of a statement on several lines.
printf 'operation a*b\n\nmodel m over "base.pres": a*b =   a.b +\n     a*b # x\n' \
    >other/long.pres
run 2 fresh other/long.pres --model m --degree 3
is err "idspan: other/long.pres:4:7: unknown operation '*'; expected an operation that is \
declared in \"base.pres\"
     a*b # x
      ^"
printf 'operation a*b\nmodel m over "base.pres": a*b = a.a\n' >other/twice.pres
run 2 fresh other/twice.pres --model m --degree 3
has err 'twice.pres:2:33: each of the 2 arguments of the operation must stand once'
printf 'operation [a,b] alternating\nmodel m algebra "%s"\n' \
    "$source_dir/data/algebras/octonions.alg" >fence.pres
run 2 fresh fence.pres --model m --degree 3
has err 'fence.pres:2:7: the algebra has no operation that is written [a,b]'
lacks err alternating
printf 'basis e1 e2\noperation a*b\ne1*e2 = e1\n' >plain.alg
printf 'operation a*b commutative\nmodel m algebra "plain.alg"\n' >commutes.pres
run 2 fresh commutes.pres --model m --degree 3
has err 'commutes.pres:2:7: the presentation declares a*b commutative, but'

finish
