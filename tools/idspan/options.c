/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * The command line: TASK FILE and long options, in any order.
 *
 * `--name value` and `--name=value` are the same; `--` ends the options. Every option is in
 * option_list (option_list.c) with its help, every task says which of them are its own, so a
 * misplaced or mistyped word can be answered with what was probably meant.
 */
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include "tool.h"

#define DEFAULT_MEMORY ((uint64_t)4 << 30)

/* ---- values -------------------------------------------------------------------------- */

/* Reads a number in decimal digits from the start of text; NULL when there is none. */
static const char *read_digits(const char *text, uint64_t *number)
{
    uint64_t value = 0;
    const char *at = text;

    for (; *at >= '0' && *at <= '9'; at++) {
        uint64_t digit = (uint64_t)(*at - '0');
        if (value > (UINT64_MAX - digit) / 10) {
            return NULL;
        }
        value = 10 * value + digit;
    }
    *number = value;
    return at > text ? at : NULL;
}

static bool read_number(option_id id, const char *text, uint64_t least, uint64_t most,
                        uint64_t *number)
{
    uint64_t value = 0;
    const char *end = read_digits(text, &value);

    if (end == NULL || *end != '\0' || value < least || value > most) {
        if (most == UINT64_MAX) {
            complain("--%s wants a whole number from %s to 2^64 - 1, not \"%s\"",
                     option_list[id].name, digits_of(least).text, text);
        } else {
            bool range = id == OPTION_DEGREE && end != NULL && strncmp(end, "..", 2) == 0;
            complain("--%s wants a whole number from %s to %s, not \"%s\"%s%s%s",
                     option_list[id].name, digits_of(least).text, digits_of(most).text, text,
                     range ? "; did you mean --degrees " : "", range ? text : "", range ? "?" : "");
        }
        return false;
    }
    *number = value;
    return true;
}

/* A..B, or N for one degree. */
static bool read_degrees(const char *text, uint32_t most, settings *read)
{
    uint64_t first = 0;
    uint64_t last = 0;
    const char *end = read_digits(text, &first);

    if (end != NULL && *end == '\0') {
        last = first;
    } else if (end != NULL && strncmp(end, "..", 2) == 0) {
        end = read_digits(end + 2, &last);
    } else {
        end = NULL;
    }
    if (end == NULL || *end != '\0') {
        complain("--degrees wants a range such as 1..7, not \"%s\"", text);
        return false;
    }
    if (first < 1 || last > most) {
        complain("--degrees %s: degrees go from 1 to %u", text, (unsigned)most);
        return false;
    }
    if (first > last) {
        complain("--degrees %s is empty; did you mean %s..%s?", text, digits_of(last).text,
                 digits_of(first).text);
        return false;
    }
    read->first_degree = (uint32_t)first;
    read->last_degree = (uint32_t)last;
    return true;
}

/* 500M, 8G, 8GB, 8GiB, none; all in powers of 1024. */
static bool read_memory(const char *text, uint64_t *bytes)
{
    static const char units[] = "kKmMgGtT";
    uint64_t value = 0;
    unsigned shift = 0;
    const char *end = read_digits(text, &value);
    const char *unit = NULL;

    if (strcmp(text, "none") == 0) {
        *bytes = 0;
        return true;
    }
    if (end != NULL && *end != '\0') {
        unit = strchr(units, *end);
        shift = unit != NULL ? 10 * (1 + (unsigned)(unit - units) / 2) : 0;
        end = unit != NULL ? end + 1 : end;
        if (unit != NULL && *end == 'i') {
            end++;
        }
        if (*end == 'B') {
            end++;
        }
    }
    if (end == NULL || *end != '\0' || value == 0 || value > UINT64_MAX >> shift) {
        complain("--memory wants a size such as 500M or 8G, or none, not \"%s\"", text);
        return false;
    }
    *bytes = value << shift;
    return true;
}

/* Where the value of an option goes: text as it is written, or a number in bounds. */
typedef enum slot_kind { SLOT_TEXT, SLOT_SHORT, SLOT_LONG, SLOT_MEMORY } slot_kind;

typedef struct slot {
    option_id id;
    slot_kind kind;
    size_t offset; /* in the settings */
    uint64_t least;
    uint64_t most;
} slot;

#define TEXT(option, member) {option, SLOT_TEXT, offsetof(settings, member), 0, 0}
#define SHORT(option, member, least, most)                                                         \
    {option, SLOT_SHORT, offsetof(settings, member), least, most}
#define LONG(option, member, least, most)                                                          \
    {option, SLOT_LONG, offsetof(settings, member), least, most}

/* Limits of degrees, and which formats there are, depend on the task, which is not yet known. */
static const slot slots[] = {
    TEXT(OPTION_DEGREE, degrees),
    TEXT(OPTION_DEGREES, degrees),
    LONG(OPTION_FROM, from, 0, UINT64_MAX),
    LONG(OPTION_COUNT, count, 0, UINT64_MAX),
    LONG(OPTION_INDEX, index, 0, UINT64_MAX),
    SHORT(OPTION_PRIMES, primes, 1, IDS_MAX_PRIMES),
    LONG(OPTION_SEED, seed, 0, UINT64_MAX),
    SHORT(OPTION_FIELD, field, 2, (1u << 30) - 1),
    TEXT(OPTION_BY, by),
    TEXT(OPTION_PARTITION, partition_text),
    TEXT(OPTION_RUN, run),
    SHORT(OPTION_JOBS, jobs, 1, 1024),
    TEXT(OPTION_CELL, cells),
    TEXT(OPTION_CANDIDATE, candidate),
    TEXT(OPTION_PROOF, proof),
    TEXT(OPTION_WITNESS, witness),
    TEXT(OPTION_MODEL, model),
    TEXT(OPTION_SAVE, save),
    TEXT(OPTION_ALGEBRA, algebra),
    SHORT(OPTION_DIMENSION, dimension, 1, IDS_MAX_DIMENSION),
    LONG(OPTION_ENTRIES, entries, 1, INT64_MAX),
    LONG(OPTION_STEPS, steps, 1, UINT64_MAX),
    TEXT(OPTION_FORMAT, format_name),
    TEXT(OPTION_OUTPUT, output),
    {OPTION_MEMORY, SLOT_MEMORY, offsetof(settings, memory), 0, 0},
    SHORT(OPTION_THREADS, threads, 1, IDS_MAX_THREADS),
};

static bool read_slot(const slot *to, const char *value, settings *read)
{
    char *place = (char *)read + to->offset;
    uint64_t number = 0;

    if (to->kind == SLOT_TEXT) {
        memcpy(place, &value, sizeof value);
        return true;
    }
    if (to->kind == SLOT_MEMORY ? !read_memory(value, &number)
                                : !read_number(to->id, value, to->least, to->most, &number)) {
        return false;
    }
    if (to->kind == SLOT_SHORT) {
        uint32_t small = (uint32_t)number;
        memcpy(place, &small, sizeof small);
    } else {
        memcpy(place, &number, sizeof number);
    }
    return true;
}

static bool read_value(option_id id, const char *value, settings *read)
{
    for (size_t i = 0; i < sizeof slots / sizeof *slots; i++) {
        if (slots[i].id == id) {
            return read_slot(&slots[i], value, read);
        }
    }
    return true;
}

/* ---- words --------------------------------------------------------------------------- */

static void complain_of_option(const char *word, size_t length)
{
    const char *names[OPTION_END + 1] = {0};
    char name[64] = {0};
    const char *near = NULL;

    for (size_t i = 0; i < OPTION_END; i++) {
        names[i] = option_list[i].name;
    }
    snprintf(name, sizeof name, "%.*s", (int)(length < sizeof name ? length : sizeof name - 1),
             word);
    near = help_nearest(name, names);
    if (near != NULL) {
        complain("there is no option --%s; did you mean --%s?", name, near);
    } else {
        complain("there is no option --%s; idspan --help lists them", name);
    }
}

/* Reads the option at argv[*at] and its value, and moves *at past both. */
static bool read_option(int argc, char **argv, int *at, settings *read)
{
    const char *word = argv[*at] + 2;
    size_t length = strcspn(word, "=");
    const char *value = word[length] == '=' ? word + length + 1 : NULL;
    unsigned id = 0;

    while (id < OPTION_END && (strncmp(option_list[id].name, word, length) != 0 ||
                               option_list[id].name[length] != '\0')) {
        id++;
    }
    if (id == OPTION_END) {
        complain_of_option(word, length);
        return false;
    }
    *at += 1;
    if (option_list[id].value == NULL && value != NULL) {
        complain("--%s takes no value", option_list[id].name);
        return false;
    }
    if (option_list[id].value != NULL && value == NULL) {
        if (*at >= argc) {
            complain("--%s wants a value: --%s %s", option_list[id].name, option_list[id].name,
                     option_list[id].value);
            return false;
        }
        value = argv[*at];
        *at += 1;
    }
    if ((read->seen & BIT(id)) != 0) {
        complain("--%s is given twice", option_list[id].name);
        return false;
    }
    read->seen |= BIT(id);
    return value == NULL || read_value((option_id)id, value, read);
}

static bool read_task(const char *word, settings *read)
{
    const char *names[16] = {0};
    const char *near = NULL;

    read->task = task_find(word);
    if (read->task != NULL) {
        return true;
    }
    for (size_t i = 0; task_list[i] != NULL; i++) {
        names[i] = task_list[i]->name;
    }
    near = help_nearest(word, names);
    if (near != NULL) {
        complain("there is no task \"%s\"; did you mean \"%s\"?", word, near);
    } else {
        complain("there is no task \"%s\"; idspan --help lists them", word);
    }
    return false;
}

/* The first word is the task, the second the file. */
static bool read_word(char **words, size_t count, settings *read)
{
    if (count == 0) {
        return true;
    }
    if (count > 1 && task_find(words[0]) == NULL && task_find(words[1]) != NULL) {
        complain("the task comes first: idspan %s %s", words[1], words[0]);
        return false;
    }
    if (!read_task(words[0], read)) {
        return false;
    }
    if (count > 2) {
        complain("one file at a time, please: \"%s\" is left over", words[2]);
        return false;
    }
    read->file = count > 1 ? words[1] : NULL;
    return true;
}

/* ---- what does not go together ------------------------------------------------------- */

static bool check_own_options(const settings *read)
{
    for (unsigned id = 0; id < OPTION_END; id++) {
        if ((read->seen & BIT(id) & ~(read->task->options | COMMON_OPTIONS)) == 0) {
            continue;
        }
        for (size_t i = 0; task_list[i] != NULL; i++) {
            if ((task_list[i]->options & BIT(id)) != 0) {
                complain("--%s is an option of \"%s\", not of \"%s\"", option_list[id].name,
                         task_list[i]->name, read->task->name);
                return false;
            }
        }
    }
    return true;
}

static bool check_field(const settings *read)
{
    for (uint32_t divisor = 2; divisor <= read->field / divisor; divisor++) {
        if (read->field % divisor == 0) {
            complain("--field wants a prime, not \"%u\": a field has a prime number of elements "
                     "here",
                     (unsigned)read->field);
            return false;
        }
    }
    return true;
}

/* Reads --degree or --degrees. */
static bool check_degrees(settings *read)
{
    uint32_t most = read->task->most_degree > 0 ? read->task->most_degree : IDS_MAX_DEGREE;
    uint64_t number = 0;

    if ((read->seen & BIT(OPTION_DEGREES)) != 0) {
        return read_degrees(read->degrees, most, read);
    }
    if ((read->seen & BIT(OPTION_DEGREE)) != 0) {
        if (!read_number(OPTION_DEGREE, read->degrees, 1, most, &number)) {
            return false;
        }
        read->first_degree = (uint32_t)number;
        read->last_degree = (uint32_t)number;
    }
    return true;
}

/* Reads --format, one of the task's own. */
static bool check_format(settings *read)
{
    const char *const *names = read->task->formats != NULL ? read->task->formats : table_formats;
    char list[FORMATS_CHARS];
    const char *near = NULL;

    if (read->format_name == NULL) {
        return true;
    }
    for (unsigned i = 0; names[i] != NULL; i++) {
        if (strcmp(read->format_name, names[i]) == 0) {
            read->format = (ids_format)i;
            return true;
        }
    }
    help_formats(read->task, list);
    near = help_nearest(read->format_name, names);
    complain("--format can be %s, not \"%s\"%s%s%s", list, read->format_name,
             near != NULL ? "; did you mean " : "", near != NULL ? near : "",
             near != NULL ? "?" : "");
    return false;
}

/* Options that say different things about the same. */
static bool check_pairs(const settings *read)
{
    static const option_id pairs[][2] = {
        {OPTION_DEGREE, OPTION_DEGREES}, {OPTION_FIELD, OPTION_EXACT},
        {OPTION_FIELD, OPTION_PRIMES},   {OPTION_FIELD, OPTION_SEED},
        {OPTION_PLAIN, OPTION_FIELD},    {OPTION_PLAIN, OPTION_SEED},
        {OPTION_CANDIDATE, OPTION_ALL},  {OPTION_PROOF, OPTION_ALL},
        {OPTION_WITNESS, OPTION_ALL},    {OPTION_PARTITION, OPTION_CROSS_CHECK},
        {OPTION_TABLE, OPTION_SAVE},     {OPTION_ALGEBRA, OPTION_ALL},
        {OPTION_RUN, OPTION_PARTITION},  {OPTION_RUN, OPTION_CROSS_CHECK},
        {OPTION_RUN, OPTION_THREADS},    {OPTION_PLAN, OPTION_LIST_CELLS},
        {OPTION_PLAN, OPTION_CELL},      {OPTION_CELL, OPTION_LIST_CELLS}};

    for (size_t i = 0; i < sizeof pairs / sizeof *pairs; i++) {
        uint64_t both = BIT(pairs[i][0]) | BIT(pairs[i][1]);
        if ((read->seen & both) == both) {
            complain("--%s and --%s exclude each other", option_list[pairs[i][0]].name,
                     option_list[pairs[i][1]].name);
            return false;
        }
    }
    return true;
}

static bool check(settings *read)
{
    const task *chosen = read->task;

    if ((read->seen & (BIT(OPTION_HELP) | BIT(OPTION_VERSION))) != 0) {
        return true;
    }
    if (chosen == NULL) {
        complain("say what to do: idspan TASK FILE; idspan --help tells more");
        return false;
    }
    if (!check_own_options(read)) {
        return false;
    }
    if (!rank_check_run(read)) {
        return false;
    }
    if (read->file == NULL && read->run == NULL) {
        complain("\"%s\" wants a %s file, or - for standard input:\n"
                 "        idspan %s FILE%s",
                 chosen->name, chosen->wants_text ? "proof, witness or algebra" : "presentation",
                 chosen->name, chosen->usage);
        return false;
    }
    if (chosen->wanted != 0 && (read->seen & chosen->wanted) == 0 && read->file != NULL) {
        complain("\"%s\" wants a degree:\n        idspan %s %s%s", chosen->name, chosen->name,
                 read->file, chosen->usage);
        return false;
    }
    return check_pairs(read) && check_field(read) && files_check(read) && check_degrees(read) &&
           check_format(read) &&
           (chosen->check == NULL || chosen->check(read));
}

bool settings_read(int argc, char **argv, settings *read)
{
    char *words[3] = {0};
    size_t count = 0;
    bool options = true;
    int64_t processors = sysconf(_SC_NPROCESSORS_ONLN);
    int at = 1;

    memset(read, 0, sizeof *read);
    read->count = UINT64_MAX;
    read->memory = DEFAULT_MEMORY;
    read->threads = processors > 0 && processors < 1024 ? (uint32_t)processors : 1;
    while (at < argc) {
        char *word = argv[at];
        if (!options || word[0] != '-' || word[1] == '\0') {
            if (count < 3) {
                words[count++] = word;
            }
            at++;
        } else if (strcmp(word, "--") == 0) {
            options = false;
            at++;
        } else if (strcmp(word, "-h") == 0) {
            read->seen |= BIT(OPTION_HELP);
            at++;
        } else if (word[1] != '-') {
            complain("there is no option %s; options are written with two dashes, --help", word);
            return false;
        } else if (!read_option(argc, argv, &at, read)) {
            return false;
        }
    }
    return read_word(words, count, read) && check(read);
}
