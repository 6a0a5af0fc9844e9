/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * main() for a fuzz target without a fuzzer: hands every file of the folders named on the command
 * line to the target, and the first half of it too, since cut input is the commonest damage.
 */
#include <dirent.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

static void fail(const char *what, const char *path)
{
    fprintf(stderr, "%s %s\n", what, path);
    exit(EXIT_FAILURE);
}

/* A block of exactly `size` bytes, so that a sanitizer sees a read behind its end. */
static void feed(const uint8_t *data, size_t size)
{
    uint8_t *copy = malloc(size == 0 ? 1 : size);

    if (copy == NULL) {
        fail("no memory for", "a copy");
    }
    memcpy(copy, data, size);
    (void)LLVMFuzzerTestOneInput(copy, size);
    free(copy);
}

static void replay_file(const char *path)
{
    static uint8_t data[1u << 20];
    FILE *file = fopen(path, "rb");
    size_t size = 0;

    if (file == NULL) {
        fail("cannot open", path);
    }
    size = fread(data, 1, sizeof data, file);
    if (ferror(file) || !feof(file)) {
        fail("cannot read all of", path);
    }
    fclose(file);
    feed(data, size);
    feed(data, size / 2);
}

static unsigned replay_folder(const char *folder)
{
    DIR *directory = opendir(folder);
    unsigned count = 0;

    if (directory == NULL) {
        fail("cannot open", folder);
    }
    for (struct dirent *entry = readdir(directory); entry != NULL; entry = readdir(directory)) {
        char path[4096] = "";

        if (entry->d_name[0] != '.') {
            snprintf(path, sizeof path, "%s/%s", folder, entry->d_name);
            replay_file(path);
            count++;
        }
    }
    closedir(directory);
    return count;
}

int main(int argc, char **argv)
{
    unsigned count = 0;

    feed((const uint8_t *)"", 0);
    for (int i = 1; i < argc; i++) {
        count += replay_folder(argv[i]);
    }
    printf("%u files replayed\n", count);
    return count > 0 ? EXIT_SUCCESS : EXIT_FAILURE;
}
