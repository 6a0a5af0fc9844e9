/* SPDX-License-Identifier: BSD-2-Clause */
/* lib/run/sha256.c and record.c: checksums and the form of the files. */
#include <string.h>

#include "run/run_private.h"
#include "support.h"

/* Messages and digests of FIPS 180-2, appendix B.1 to B.3; that of no bytes from NIST's examples
 * for SHA-256 (CAVP, SHA256ShortMsg, Len = 0). */
START_TEST(test_published_digests)
{
    static const struct {
        const char *message;
        const char *digest;
    } published[] = {
        {"", "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855"},
        {"abc", "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"},
        {"abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq",
         "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1"},
    };
    static char million[1000000];
    char hex[IDSI_SHA256_HEX];

    for (size_t i = 0; i < sizeof published / sizeof *published; i++) {
        idsi_sha256(published[i].message, strlen(published[i].message), hex);
        ck_assert_str_eq(hex, published[i].digest);
    }
    memset(million, 'a', sizeof million);
    idsi_sha256(million, sizeof million, hex);
    ck_assert_str_eq(hex, "cdc76e5c9914fb9281a1c7e284d73e67f1809a48a497200e046d39ccc7112cd0");
}
END_TEST

static void make(ids_ctx *ctx, idsi_text *text)
{
    TEST_OK(ctx, idsi_record_begin(ctx, "thing", text));
    TEST_OK(ctx, idsi_record_put(text, "name", "a: b\nc"));
    TEST_OK(ctx, idsi_record_put_number(text, "most", UINT64_MAX));
    TEST_OK(ctx, idsi_record_put_number(text, "none", 0));
    TEST_OK(ctx, idsi_record_end(text));
}

static const char *read_it(ids_ctx *ctx, const char *text, size_t length, idsi_record *record)
{
    const char *wrong = NULL;
    TEST_OK(ctx, idsi_record_read(ctx, "thing", text, length, record, &wrong));
    return wrong;
}

START_TEST(test_round_trip)
{
    ids_ctx *ctx = test_ctx();
    idsi_text text;
    idsi_record record;
    uint64_t number = 1;

    make(ctx, &text);
    ck_assert_ptr_null(read_it(ctx, text.data, text.length, &record));
    ck_assert_uint_eq(record.count, 3);
    ck_assert_str_eq(idsi_record_get(&record, "name"), "a: b c");
    ck_assert(idsi_record_get_number(&record, "most", UINT64_MAX, &number));
    ck_assert_uint_eq(number, UINT64_MAX);
    ck_assert(!idsi_record_get_number(&record, "most", UINT64_MAX - 1, &number));
    ck_assert(idsi_record_get_number(&record, "none", 0, &number));
    ck_assert_uint_eq(number, 0);
    ck_assert(!idsi_record_get_number(&record, "name", UINT64_MAX, &number));
    ck_assert_ptr_null(idsi_record_get(&record, "other"));
    idsi_record_clear(&record);
    idsi_text_clear(&text);
    test_ctx_free(ctx);
}
END_TEST

/* Every cut and every flipped bit is noticed. */
START_TEST(test_damage)
{
    ids_ctx *ctx = test_ctx();
    idsi_text text;
    idsi_record record;

    make(ctx, &text);
    for (size_t length = 0; length < text.length; length++) {
        ck_assert_ptr_nonnull(read_it(ctx, text.data, length, &record));
        idsi_record_clear(&record);
    }
    for (size_t bit = 0; bit < 8 * text.length; bit++) {
        text.data[bit / 8] = (char)(text.data[bit / 8] ^ 1 << bit % 8);
        ck_assert_ptr_nonnull(read_it(ctx, text.data, text.length, &record));
        idsi_record_clear(&record);
        text.data[bit / 8] = (char)(text.data[bit / 8] ^ 1 << bit % 8);
    }
    idsi_text_clear(&text);
    test_ctx_free(ctx);
}
END_TEST

/* A right checksum does not make a record of anything. */
START_TEST(test_form)
{
    static const char *const bodies[] = {
        "",         "idspan thing 2\n",         "idspan other 1\n",
        "idspan thing 1\nno colon\n",           "idspan thing 1\n: no key\n",
        "idspan thing 1\na: b",                 "idspan thing 1\na: b\na: c\n",
        "idspan thing 1\na: b\n\nc: d\n",
    };
    ids_ctx *ctx = test_ctx();
    idsi_record record;

    for (size_t i = 0; i < sizeof bodies / sizeof *bodies; i++) {
        idsi_text text;
        idsi_text_init(&text, ctx);
        TEST_OK(ctx, idsi_text_puts(&text, bodies[i]));
        TEST_OK(ctx, idsi_record_end(&text));
        ck_assert_ptr_nonnull(read_it(ctx, text.data, text.length, &record));
        idsi_record_clear(&record);
        idsi_text_clear(&text);
    }
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("run: records");
    TCase *tcase = tcase_create("record");

    tcase_add_test(tcase, test_published_digests);
    tcase_add_test(tcase, test_round_trip);
    tcase_add_test(tcase, test_damage);
    tcase_add_test(tcase, test_form);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
