#!/bin/bash
# SPDX-License-Identifier: BSD-2-Clause
#
# docs.sh SOURCE_DIR
#
# The comment of every public function is complete and in order: a sentence that says the result;
# @param for each parameter in its place, pointers with who owns them; @return, with a cause for
# each status; Cost, Threads, Cancel and Border (where a context is taken), Source, Since. The
# overview in idspan(3) names every header, and no function that there is not.
here=$(cd "$(dirname "${BASH_SOURCE[0]}")" && pwd)
# shellcheck source-path=SCRIPTDIR source=common.sh
. "$here/common.sh"

cd "$1"
while IFS= read -r line; do
    complain "$line"
done < <(
    awk '
    function say(text) { print FILENAME ": " name "(): " text }

    # Place of a word in the comment, 0 when it is not there.
    function place(word) { return index(comment, word) }

    function in_order(earlier, later) {
        if (place(earlier) && place(later) && place(earlier) > place(later))
            say("\"" later "\" stands before \"" earlier "\"")
    }

    function check_param(type, param,    at, text, next_one) {
        at = match(comment, "@param ([a-z_]+, )*" param "[ ,]")
        if (!at) {
            say("no @param " param)
            return
        }
        if (at < last_param) say("@param " param " is out of order")
        last_param = at
        text = substr(comment, at + 1)
        next_one = match(text, /@(param|return)|Cost:/)
        text = substr(text, 1, next_one - 1)
        if (type ~ /\*/ && type !~ /_fn/ && text !~ /(borrowed|kept|owned| out[ ,.:])/)
            say("who owns " param "?")
    }

    function check_status(    text, count, part, i, code) {
        text = substr(comment, place("@return"))
        text = substr(text, 1, index(text, "Cost:"))
        if (text !~ /^@return IDS_OK/) say("@return does not begin with IDS_OK")
        count = split(text, part, /IDS_ERR_/)
        for (i = 2; i <= count; i++) {
            code = part[i]
            sub(/^[A-Z_]+ */, "", code)
            if (code !~ /[a-z]|NULL/) say("no cause for IDS_ERR_" part[i])
        }
        if (!place("IDS_ERR_ARG")) say("IDS_ERR_ARG is not explained")
    }

    function check(    declaration, params, count, part, i, result, type) {
        declaration = text
        gsub(/[ \t\n]+/, " ", declaration)
        sub(/^IDS_API (IDS_MUST_USE )?/, "", declaration)
        match(declaration, /ids_[a-z0-9_]+\(/)
        name = substr(declaration, RSTART, RLENGTH - 1)
        result = substr(declaration, 1, RSTART - 1)
        params = substr(declaration, RSTART + RLENGTH)
        sub(/\);.*/, "", params)
        functions++
        if (comment == "") {
            say("no comment")
            return
        }
        gsub(/[ \t\n]+/, " ", comment)
        if (comment !~ /^ ?[A-Z"][^@]*[.:]/) say("no sentence that says the result")
        takes_ctx = params ~ /(^|, )ids_ctx \*ctx/ && result ~ /ids_status/
        last_param = 0
        count = params == "void" ? 0 : split(params, part, / *, */)
        for (i = 1; i <= count; i++) {
            type = part[i]
            sub(/\[\]$/, "", part[i])
            sub(/.*[ *]/, "", part[i])
            check_param(type, part[i])
        }
        if (result !~ /^void $/ && !place("@return")) say("no @return")
        if (text ~ /IDS_MUST_USE/) check_status()
        if (!place("Cost:")) say("no cost")
        if (!place("Threads:")) say("nothing about threads")
        if (takes_ctx && !place("Cancel:")) say("nothing about cancelling")
        if (takes_ctx && !place("Border:")) say("no border")
        if (comment !~ /Since: [0-9.]+ ?$/) say("does not end with \"Since: VERSION\"")
        in_order("@return", "Cost:")
        in_order("Cost:", "Threads:")
        in_order("Threads:", "Cancel:")
        in_order("Cancel:", "Border:")
        in_order("Border:", "Source:")
    }

    FNR == 1 { comment = ""; text = ""; state = "" }
    state == "declaration" {
        text = text " " $0
    }
    state == "comment" || /^\/\*\*/ {
        if (/^\/\*\*/) comment = ""
        line = $0
        sub(/^\/\*\*/, "", line)
        sub(/^ \*( |$)/, "", line)
        state = line ~ /\*\/ *$/ ? "" : "comment"
        sub(/ *\*\/ *$/, "", line)
        comment = comment line "\n"
        next
    }
    /^IDS_API/ {
        state = "declaration"
        text = $0
    }
    state == "declaration" && /;/ {
        check()
        state = ""
        comment = ""
    }
    state == "" && !/^IDS_API/ { comment = "" }
    END { if (functions == 0) print "no public function was found" }
    ' include/idspan/*.h
)

manual=tools/idspan/idspan.3
for header in include/idspan/*.h; do
    header=${header#include/}
    grep -qF "$header" "$manual" || complain "idspan(3) does not name $header"
done
for name in $(grep -oE 'ids_[a-z_]+ \(\)' "$manual" | sort -u); do
    if [[ $name == ids_* ]] && ! grep -qx "$name" tests/abi/exports.txt; then
        complain "idspan(3) names $name, which is not public"
    fi
done
finish
