#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# Output does not depend on the number of threads, byte for byte.
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"

cp "$source_dir"/data/varieties/{alternative,poisson}.pres "$source_dir"/data/crosses/*.pres .
cat >job.pres <<'END'
operation a*b commutative
identity jordan: ((x*x)*y)*x = (x*x)*(y*x)
candidate powers: ((x*x)*x)*x = (x*x)*(x*x)
candidate associative: (x*y)*z = x*(y*z)
model special associative: a*b = 1/2 a b + 1/2 b a
END

# alike STATUS ARGUMENT...: the same with 1, 2 and 5 threads. A file that the task writes under the
# name written.mtx is compared too.
alike() {
    local status=$1 threads
    shift
    for threads in 1 2 5; do
        rm -f written.*
        run "$status" "$@" --threads "$threads"
        mv out "out-$threads"
        cmp -s out-1 "out-$threads" || complain "$last: not what one thread gives"
        if [ -e written.mtx ]; then
            mv written.mtx "written-$threads"
            cmp -s written-1 "written-$threads" || complain "$last: a file differs"
        fi
    done
    seen+=" $1"
}

seen=
alike 0 show job.pres --format json
alike 0 types programme.pres --degrees 1..5 --format csv
alike 0 basis programme.pres --degree 4 --format csv
alike 0 count programme.pres --degrees 1..30 --format csv
alike 0 rank job.pres --degrees 1..7 --format json
alike 0 rank alternative.pres --degrees 1..5 --format json
alike 0 rank poisson.pres --degrees 1..5 --exact --format json
alike 0 rank job.pres --degrees 1..7 --by partition --format json
alike 0 rank alternative.pres --degrees 1..5 --by partition --primes 2 --format json
alike 0 follows job.pres --candidate powers --proof written.mtx --format json
alike 1 follows job.pres --candidate associative --witness written.mtx --format json
alike 0 fresh job.pres --model special --degrees 2..6 --format json
alike 0 matrix job.pres --degree 6 --output written.mtx
alike 0 draw programme.pres --degree 4 --format svg
run 0 follows job.pres --candidate powers --proof proof.txt
alike 0 check proof.txt

run 0 --help
for task in $(sed -n 's/^  \([a-z][a-z]*\) *FILE.*/\1/p' out); do
    [[ $seen == *" $task"* ]] || complain "$task was not tried"
done
finish
