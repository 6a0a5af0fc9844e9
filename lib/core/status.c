/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * Static strings. Names and texts of the status codes come from the one list in core.h, so that a
 * code cannot be added without them.
 */
#include "core_private.h"

const char *ids_version(void)
{
    return IDS_VERSION_STRING;
}

const char *ids_status_name(ids_status status)
{
    switch (status) {
#define STATUS_NAME(name, value, text) \
    case name:                         \
        return #name;
        IDS_STATUS_LIST(STATUS_NAME)
#undef STATUS_NAME
    }
    return "IDS_ERR_UNKNOWN";
}

const char *ids_status_text(ids_status status)
{
    switch (status) {
#define STATUS_TEXT(name, value, text) \
    case name:                         \
        return text;
        IDS_STATUS_LIST(STATUS_TEXT)
#undef STATUS_TEXT
    }
    return "unknown status code";
}
