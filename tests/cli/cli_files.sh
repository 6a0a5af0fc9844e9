#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# Input and output: missing files, standard input, parse errors with their place, failed writes.
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"

# ---- input -----------------------------------------------------------------------------

run 2 show nothing.pres
has err 'there is no file "nothing.pres"'
run 2 show jordan
has err 'did you mean "jordan.pres"?'
run 2 show .
has err 'cannot read "."'

run 0 show jordan.pres
cp out expected
run 0 show - <jordan.pres
cmp -s out expected || complain "standard input gives another output"
run 2 show - <<<'operation a*b identity'
has err 'standard input:1:15:'
run 2 show /dev/null
is err "idspan: /dev/null:1:1: no operation is declared; expected a line such as: \
operation a*b commutative"

# The places are counted by hand.
wrong() { # PLACE MESSAGE LINE...
    local place=$1 message=$2
    shift 2
    printf '%s\n' "$@" >wrong.pres
    run 2 show wrong.pres
    is_empty out
    has err "idspan: wrong.pres:$place: "
    has err "$message"
    has err '^'
}

wrong 2:13 'write (a*b)*c or a*(b*c)' 'operation a*b' 'identity a*b*c'
wrong 3:11 'unknown operation' '# two lines above' 'operation a*b' 'identity a.b'
wrong 1:1 'operation' 'operatoin a*b'
wrong 2:10 'not homogeneous' 'operation a*b' 'identity x*y = x*x'
wrong 2:12 'denominator 0' 'operation a*b' 'identity 1/0 a*b'
wrong 2:10 'wrong number of arguments' 'operation t(a,b,c)' 'identity t(a,b)'
wrong 1:11 'zero' 'operation (a,b) = (b,a) = -(b,a)'

wrong 2:15 'write 1/2 (a*b)' 'operation a*b' 'identity (a*b)/2 = a*b'
wrong 1:13 "'<' is a fence, not an infix sign" 'operation a < b'
wrong 1:11 'with one of the fences ( ) [ ] { } < >' $'operation \xe2\x9f\xa8a,b\xe2\x9f\xa9'

run 0 show - <<<$'operation a*b\nidentity x = 0'
is err 'idspan: warning: standard input:2: an identity of degree 1 makes everything 0'

# A column counts characters, not bytes.
wrong 2:15 'unknown operation' 'operation a*b' $'identity \xc3\xa9\xc3\xa9: a.b'

# ---- output ------------------------------------------------------------------------------

run 0 show jordan.pres --output result
is_empty out
cmp -s result expected || complain "--output gives another output"
run 2 show jordan.pres --output jordan.pres
has err 'would overwrite "jordan.pres"'
run 0 show jordan.pres
cmp -s out expected || complain "the refused --output has changed its input"
run 2 show jordan.pres --output no/such/folder
has err 'cannot write "no/such/folder"'
run 2 show wrong.pres --output result
cmp -s result expected || complain "a wrong input has spoiled an older output"

# ---- what was there before -------------------------------------------------------------------

# A command that fails leaves an older file as it was, and nothing beside it.
mkdir kept
cp "$source_dir/data/crosses/pair.pres" kept
unspoilt() { # STATUS ARGUMENT...: --output kept/result is a file that must not change
    echo older >kept/result
    run "$@" --output kept/result
    is kept/result older
    [ "$(ls kept)" = $'pair.pres\nresult' ] || complain "$last: left behind: $(ls kept)"
}
unspoilt 3 types kept/pair.pres --degree 40 --memory 1M
unspoilt 3 rank kept/pair.pres --degrees 9..10 --memory 100K
unspoilt 3 basis kept/pair.pres --degree 40 --memory 1M
# Degrees that were finished are a result, also in a file.
run 3 rank kept/pair.pres --degrees 1..20 --memory 1M --format csv --output kept/result
has kept/result '3,3,0,3,exact'
rm kept/result
run 3 matrix kept/pair.pres --degree 9 --memory 1M --output kept/m.mtx
[ "$(ls kept)" = pair.pres ] || complain "$last: left behind: $(ls kept)"

# Permissions stay, a symbolic link stays one, other names of the file see the result.
run 0 show jordan.pres
cp out expected
(umask 027 && "$tool" show jordan.pres --output fresh)
[ "$(stat -c %a fresh)" = 640 ] || complain "a new file has the permissions $(stat -c %a fresh)"
echo older >target && chmod 604 target && ln -s target link && ln target twin
run 0 show jordan.pres --output link
{ [ -L link ] && cmp -s target expected && cmp -s twin expected; } || complain "$last: the links"
rm twin
run 0 show jordan.pres --output target
[ "$(stat -c %a target)" = 604 ] || complain "$last: permissions $(stat -c %a target)"
rm target
run 0 show jordan.pres --output link
{ [ -L link ] && cmp -s target expected; } || complain "$last: a link to nothing yet"
run 0 show jordan.pres --output /dev/stdout
cmp -s out expected || complain "$last: another output"
{ "$tool" show jordan.pres --output /dev/stdout && echo more; } >>both
[ "$(tail -n 1 both)" = more ] || complain "/dev/stdout lost what came after it"
run 0 show jordan.pres --output /dev/null
[ -c /dev/null ] || complain "$last: /dev/null is gone"
mkfifo pipe
timeout 20 cat pipe >through &
run 0 show jordan.pres --output pipe
wait $!
{ [ -p pipe ] && cmp -s through expected; } || complain "$last: a pipe"

# full ARGUMENT...: with standard output on a full disk.
full() {
    local got=0
    "$tool" "$@" >/dev/full 2>err || got=$?
    last="idspan $* >/dev/full"
    [ "$got" -eq 2 ] || complain "$last: exit status $got, not 2"
    has err 'cannot write standard output: No space left on device'
    [ "$(wc -l <err)" -eq 1 ] || complain "$last: more than one line: $(cat err)"
}

if [ -w /dev/full ]; then
    full --help
    full --version
    for format in text csv json latex; do
        full show jordan.pres --format "$format"
        full types jordan.pres --degrees 1..9 --format "$format"
        full basis jordan.pres --degree 7 --format "$format"
        full rank jordan.pres --degrees 1..4 --format "$format"
    done
    run 2 show jordan.pres --output /dev/full
    has err 'cannot write /dev/full: No space left on device'
fi

# A reader that goes away ends the tool at once: all of this table would take hours.
timeout 20 "$tool" basis commutative.pres --degree 12 --format csv 2>err | head -n 3 >out
status=("${PIPESTATUS[@]}")
last="idspan basis | head"
[ "${status[0]}" -eq 141 ] || complain "$last: status ${status[0]}, not that of SIGPIPE"
[ "$(wc -l <out)" -eq 3 ] || complain "$last: not three lines"
is_empty err

finish
