/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * LaTeX. The characters that need escaping, and the commands for them, are those of LaTeX2e's
 * own documentation (common practice, no single source); the rest is drawn by hand.
 */
#include "render_capture.h"

START_TEST(test_tabular)
{
    static const ids_column columns[] = {
        {"degree", IDS_COLUMN_NUMBER, 0},
        {"linear_terms", IDS_COLUMN_TEXT, 0},
        {"monomial", IDS_COLUMN_MATH, 0},
    };
    static const char *const cells[] = {"3", "50 % of #1 & _", "(a*b)*c", "-1", "[a]", ""};
    static const char *const notes[] = {"seed", "1\n2", NULL};

    expect_table(IDS_FORMAT_LATEX, columns, 3, cells, 2, notes,
                 "% Table: rank; the preamble needs \\usepackage{booktabs}.\n"
                 "\\begin{tabular}{rll}\n"
                 "\\toprule\n"
                 "degree & linear\\_terms & monomial \\\\\n"
                 "\\midrule\n"
                 "3 & 50 \\% of \\#1 \\& \\_ & $(a\\cdot b)\\cdot c$ \\\\\n"
                 "$-1$ & {[}a] &  \\\\\n"
                 "\\bottomrule\n"
                 "\\end{tabular}\n"
                 "% seed: 1 2\n");
}
END_TEST

/* Rows of one degree stand together; a degree of one row needs no space of its own. */
START_TEST(test_groups)
{
    static const ids_column numbers[] = {{"degree", IDS_COLUMN_NUMBER, 0}};
    static const ids_column words[] = {{"degree", IDS_COLUMN_TEXT, 0}};
    static const char *const cells[] = {"1", "2", "2", "3", "3", "4"};

    expect_table(IDS_FORMAT_LATEX, numbers, 1, cells, 6, NULL,
                 "% Table: rank; the preamble needs \\usepackage{booktabs}.\n"
                 "\\begin{tabular}{r}\n\\toprule\ndegree \\\\\n\\midrule\n"
                 "1 \\\\\n2 \\\\\n2 \\\\\n\\addlinespace\n"
                 "3 \\\\\n3 \\\\\n\\addlinespace\n4 \\\\\n"
                 "\\bottomrule\n\\end{tabular}\n");
    expect_table(IDS_FORMAT_LATEX, words, 1, cells + 1, 3, NULL,
                 "% Table: rank; the preamble needs \\usepackage{booktabs}.\n"
                 "\\begin{tabular}{l}\n\\toprule\ndegree \\\\\n\\midrule\n"
                 "2 \\\\\n2 \\\\\n3 \\\\\n"
                 "\\bottomrule\n\\end{tabular}\n");
}
END_TEST

typedef struct pair {
    const char *text;
    const char *latex;
} pair;

static const pair words[] = {
    {"plain words", "plain words"},
    {"\\{}$&%#_^~", "\\textbackslash{}\\{\\}\\$\\&\\%\\#\\_\\textasciicircum{}\\textasciitilde{}"},
    {"<|>", "\\textless{}\\textbar{}\\textgreater{}"},
    {"[*]", "{[}{*}]"},
    {"caf\xc3\xa9", "caf\xc3\xa9"},
    {"a\nb", "a b"},
};

static const pair formulas[] = {
    {"(x*x)*x", "(x\\cdot x)\\cdot x"},
    {"(a,b,c)", "(a,b,c)"},
    {"{a,b,c} = {c,b,a}", "\\{a,b,c\\} = \\{c,b,a\\}"},
    {"<a,<b,c>>", "\\langle a,\\langle b,c\\rangle \\rangle "},
    {"a<b", "a<b"},
    {"[a,b]", "[a,b]"},
    {"t(a,b)", "t(a,b)"},
    {"mul(a,b)", "\\mathrm{mul}(a,b)"},
    {"x1*x12", "x_{1}\\cdot x_{12}"},
    {"x_1*y'", "x_{1}\\cdot y'"},
    {"my_op(a,b)", "\\mathrm{my\\_op}(a,b)"},
    {"(a o b) o c", "(a \\circ b) \\circ c"},
    {"a star b", "a \\mathbin{\\mathrm{star}} b"},
    {"o*a", "o\\cdot a"},
    {"2*(x,x,y)*z - 1/3*(y,x,x)*z", "2\\,(x,x,y)\\cdot z - \\frac{1}{3}\\,(y,x,x)\\cdot z"},
    {"-3 a*b + 2 c*d", "-3 a\\cdot b + 2 c\\cdot d"},
    {"- a*b + c*d", "{}- a\\cdot b + c\\cdot d"},
    {"2^-61", "2^{-61}"},
    {"exact", "\\mathrm{exact}"},
    {"a.b", "a\\mathbin{.}b"},
    {"a&b", "a\\mathbin{\\&}b"},
    {"a%b", "a\\mathbin{\\%}b"},
    {"a#b$c_d^e~f\\g", "a\\mathbin{\\#}b\\mathbin{\\$}\\mathrm{c\\_d}\\wedge e\\sim f\\setminus g"},
    {"a\xe2\x88\x98"
     "b",
     "a\\circ b"},
    {"a\xe2\x97\x87"
     "b",
     "a\\mathbin{\\mathrm{U{+}25C7}}b"},
    {"\xce\xb1*\xce\xbb\xe2\x82\x81\xe2\x82\x82*b", "\\alpha \\cdot \\lambda _{12}\\cdot b"},
    {"\xc3\xa9*b", "\\mbox{\xc3\xa9}\\cdot b"},
    {"", ""},
};

static void expect_pair(const pair *expected, ids_status (*convert)(idsi_text *, const char *))
{
    ids_ctx *ctx = test_ctx();
    idsi_text line;
    char *made = NULL;

    idsi_text_init(&line, ctx);
    TEST_OK(ctx, convert(&line, expected->text));
    TEST_OK(ctx, idsi_text_take(&line, &made));
    ck_assert_str_eq(made, expected->latex);
    ids_string_free(ctx, made);
    test_ctx_free(ctx);
}

START_TEST(test_words)
{
    expect_pair(&words[_i], idsi_latex_words);
}
END_TEST

START_TEST(test_formulas)
{
    expect_pair(&formulas[_i], idsi_latex_formula);
}
END_TEST

/* Whatever bytes come in, every brace is closed and no command character stands bare. */
START_TEST(test_any_bytes)
{
    ids_ctx *ctx = test_ctx();
    idsi_random random;
    idsi_text line;

    test_random(&random, 1);
    idsi_text_init(&line, ctx);
    for (uint64_t round = 0; round < 2000 * test_scale(); round++) {
        char text[16] = {0};
        int depth = 0;
        bool bad = false; /* an assertion for each byte would take seconds */
        for (size_t i = 0; i < sizeof text - 1; i++) {
            text[i] = (char)(1 + idsi_random_below(&random, 255));
        }
        line.length = 0;
        TEST_OK(ctx, idsi_latex_formula(&line, text));
        for (size_t i = 0; i < line.length; i++) {
            char c = line.data[i];
            bool escaped = i > 0 && line.data[i - 1] == '\\';
            depth += !escaped && c == '{' ? 1 : 0;
            depth -= !escaped && c == '}' ? 1 : 0;
            bad = bad || depth < 0 || (!escaped && strchr("%&#$~", c) != NULL);
        }
        ck_assert(!bad && depth == 0);
    }
    idsi_text_clear(&line);
    test_ctx_free(ctx);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("render_latex");
    TCase *tcase = tcase_create("latex");

    tcase_add_test(tcase, test_tabular);
    tcase_add_test(tcase, test_groups);
    tcase_add_loop_test(tcase, test_words, 0, (int)(sizeof words / sizeof words[0]));
    tcase_add_loop_test(tcase, test_formulas, 0, (int)(sizeof formulas / sizeof formulas[0]));
    tcase_add_test(tcase, test_any_bytes);
    suite_add_tcase(suite, tcase);
    return test_run(suite);
}
