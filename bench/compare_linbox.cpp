/* SPDX-License-Identifier: BSD-2-Clause */
/*
 * compare_linbox MATRIX
 *
 * Rank mod the prime of bench_rank of a matrix that bench_rank --export wrote, by LinBox's sparse
 * elimination. Prints method, rank, seconds of the processor without reading, with tabs.
 */
#include <linbox/linbox-config.h>

#include <cstdio>
#include <ctime>
#include <fstream>

#include <givaro/modular.h>
#include <linbox/matrix/sparse-matrix.h>
#include <linbox/solutions/rank.h>

int main(int argc, char **argv)
{
    typedef Givaro::Modular<int64_t> field;
    field mod_p(1073741789);
    size_t rank = 0;
    std::ifstream input(argc == 2 ? argv[1] : "");

    if (!input) {
        std::fprintf(stderr, "usage: compare_linbox MATRIX\n");
        return 1;
    }
    LinBox::MatrixStream<field> stream(mod_p, input);
    LinBox::SparseMatrix<field, LinBox::SparseMatrixFormat::SparseSeq> matrix(stream);
    std::clock_t begin = std::clock();
    LinBox::rankInPlace(rank, matrix, LinBox::Method::SparseElimination());
    std::printf("linbox\t%zu\t%.4f\n", rank, double(std::clock() - begin) / CLOCKS_PER_SEC);
    return 0;
}
