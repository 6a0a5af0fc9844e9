/* SPDX-License-Identifier: BSD-2-Clause */
/* Whether a text is well-formed XML. */
#ifndef IDSPAN_XML_CHECK_H
#define IDSPAN_XML_CHECK_H

#include <check.h>
#include <stddef.h>

/* Elements are nested and markup characters escaped, in SVG or HTML as idspan writes it. */
void check_xml(const char *at);
/* xmllint's opinion, where it is installed. */
void check_xmllint(const char *text, size_t length);

#endif
