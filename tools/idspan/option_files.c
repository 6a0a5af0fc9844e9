/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The files that the command line names: what is written must not be what is read.
 */
#include <string.h>
#include <unistd.h>

#include "tool.h"

/* Whether two names are of one file, now or once it has been written; devices are shared. */
static bool is_same_file(const char *a, const char *b)
{
    return output_is_file(a, b) || (strcmp(a, b) == 0 && access(a, F_OK) != 0);
}

/*
 * No option writes to the file that is read, and no two to the same one: but of those that follows
 * writes when the answer is yes and when it is no.
 */
bool files_check(const settings *read)
{
    const struct {
        option_id id;
        const char *name;
    } written[] = {{OPTION_OUTPUT, read->output},
                   {OPTION_SAVE, read->save},
                   {OPTION_ALGEBRA, read->algebra},
                   {OPTION_WITNESS, read->witness},
                   {OPTION_PROOF, read->proof}};

    for (size_t i = 0; i < sizeof written / sizeof *written; i++) {
        if (written[i].name == NULL) {
            continue;
        }
        if (read->file != NULL && output_is_file(written[i].name, read->file)) {
            complain("--%s would overwrite \"%s\", the file that is read",
                     option_list[written[i].id].name, read->file);
            return false;
        }
        for (size_t j = 0; j < i; j++) {
            bool both = written[i].id != OPTION_PROOF || j == 0;
            if (both && written[j].name != NULL && is_same_file(written[i].name, written[j].name)) {
                complain("--%s and --%s name the same file", option_list[written[j].id].name,
                         option_list[written[i].id].name);
                return false;
            }
        }
    }
    return true;
}
