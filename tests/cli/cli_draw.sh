#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# The task draw: sheets in each format, parts of them, and what is refused.
here=$(dirname "$(readlink -f "$0")")
# shellcheck source=tests/cli/common.sh
. "$here/common.sh"

# ---- text: drawn by hand ----------------------------------------------------------------

run 0 draw commutative.pres --degree 4
is out 'Association types of degree 4: 2 types, 15 multilinear monomials

  *  a*b commutative

     ┌───*───┐         ┌───*───┐
  ┌──*──┐    x       ┌─*─┐   ┌─*─┐
┌─*─┐   x            x   x   x   x
x   x

0  ((x*x)*x)*x       1  (x*x)*(x*x)
S2, order 2          S2 wr S2, order 8
12 monomials         3 monomials'
run 0 draw commutative.pres --degree 4 --index 1 --format ascii
is out 'Association types of degree 4: 1 of 2 types

  *  a*b commutative

  .---*---.
.-*-.   .-*-.
x   x   x   x

1  (x*x)*(x*x)
S2 wr S2, order 8
3 monomials'
run 0 draw ternary.pres --degree 3 --monomials --format ascii
has out "1 monomial"
has out ".---()---."
has out "0  (a,b,c)"
run 0 draw ternary.pres --degree 4
is out 'Association types of degree 4: no products have that many arguments

  ()  (a,b,c) commutative'

# ---- SVG, TikZ, parts ---------------------------------------------------------------------

run 0 draw commutative.pres --degree 6 --format svg --output types.svg
is_empty out
[ "$(grep -c 'class="tree"' types.svg)" -eq 6 ] || complain "types.svg has not 6 trees"
if command -v xmllint >/dev/null; then
    xmllint --noout types.svg || complain "types.svg is not well-formed"
fi
run 0 draw commutative.pres --degree 6 --format tikz
[ "$(grep -c 'begin{minipage}' out)" -eq 6 ] || complain "not 6 trees in TikZ"
run 0 draw commutative.pres --degree 12 --monomials --from 13749310500 --count 5 --format svg
[ "$(grep -c 'class="tree"' out)" -eq 5 ] || complain "not 5 monomials"
has out 'id="tree13749310504"'

# ---- refusals --------------------------------------------------------------------------------

run 3 draw commutative.pres --degree 12 --monomials
is_empty out
has err "13749310575 monomials"
has err "--count"
run 2 draw commutative.pres --degree 4 --index 2
has err "indices count from 0"
run 2 draw commutative.pres --degree 4 --index 0 --count 2
has err "--index draws one tree"
run 2 draw commutative.pres --degree 4 --format csv
has err "text, ascii, svg or tikz"
run 2 draw commutative.pres --degree 4 --format svgg
has err "did you mean svg"
run 2 types commutative.pres --degree 4 --format svg
has err "text, csv, json or latex"
run 2 draw commutative.pres
has err "wants a degree"
finish
