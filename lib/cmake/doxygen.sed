# SPDX-License-Identifier: BSD-2-Clause
#
# What Doxygen reads instead of a header: the parts of a comment that begin with a word and a colon
# become paragraphs with headings, the statuses after @return a list, and the list of status codes
# the values of the enumeration that the preprocessor makes of it.
s/^( \* @return IDS_OK)$/\1, or/
s/^ \* {9}(IDS_ERR_[A-Z_]+) +/ * - \1: /
s/(^ \*|\.) (Cost|Threads|Cancel|Border|Source|Since): /\1\n * @par \2\n * /
s/(\.) (Threads|Cancel|Border|Source|Since): /\1\n * @par \2\n * /
s/(\.) (Threads|Cancel|Border|Source|Since): /\1\n * @par \2\n * /
s/(\.) (Threads|Cancel|Border|Source|Since): /\1\n * @par \2\n * /

/^    X\(IDS_/{
    p
    s/^    X\((IDS_[A-Z_]+), ([0-9]+), "(.*)"\).*/    \1 = \2, \/**< \3 *\//
    H
    d
}
/^    IDS_STATUS_LIST\(IDS_STATUS_ENUM\)/g
/^#(define|undef) IDS_STATUS_ENUM/d
