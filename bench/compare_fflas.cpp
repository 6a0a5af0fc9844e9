/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * compare_fflas SIZE ...
 *
 * The product and the rank of random SIZE x SIZE matrices over a 23-bit prime by FFLAS-FFPACK, on
 * one thread; to be held against bench_dense. Prints lines: name, seconds of the processor.
 */
#include <cstdio>
#include <cstdlib>
#include <ctime>

#include <givaro/modular-balanced.h>

#include <fflas-ffpack/fflas-ffpack.h>

static double seconds_since(std::clock_t begin)
{
    return double(std::clock() - begin) / CLOCKS_PER_SEC;
}

int main(int argc, char **argv)
{
    typedef Givaro::ModularBalanced<double> field;
    field mod_p(8388593);
    field::RandIter random(mod_p, 1);

    for (int arg = 1; arg < argc; arg++) {
        size_t n = std::strtoul(argv[arg], nullptr, 10);
        double *a = FFLAS::fflas_new<double>(n * n);
        double *b = FFLAS::fflas_new<double>(n * n);
        double *c = FFLAS::fflas_new<double>(n * n);
        for (size_t i = 0; i < n * n; i++) {
            random.random(a[i]);
            random.random(b[i]);
        }
        std::clock_t begin = std::clock();
        FFLAS::fgemm(mod_p, FFLAS::FflasNoTrans, FFLAS::FflasNoTrans, n, n, n, mod_p.one, a, n, b,
                     n, mod_p.zero, c, n);
        std::printf("fflas_product_%zu_cpu\t%.6f\n", n, seconds_since(begin));
        begin = std::clock();
        size_t rank = FFPACK::Rank(mod_p, n, n, a, n);
        std::printf("fflas_rank_%zu_cpu\t%.6f\n", n, seconds_since(begin));
        if (rank + 2 < n) {
            std::fprintf(stderr, "compare_fflas: rank %zu\n", rank);
            return 1;
        }
        FFLAS::fflas_delete(a);
        FFLAS::fflas_delete(b);
        FFLAS::fflas_delete(c);
    }
    return 0;
}
