/* SPDX-License-Identifier: BSD-2-Clause */
/* The smallest use of the library: types of a commutative product in degree 4. */
#include <stdio.h>
#include <stdlib.h>

#include <idspan/idspan.h>

int main(void)
{
    ids_operation product = {0};
    ids_ctx *ctx = NULL;
    ids_signature *signature = NULL;
    ids_types *types = NULL;
    int status = EXIT_FAILURE;

    product.notation = IDS_NOTATION_INFIX;
    product.open = "*";
    product.arity = 2;
    product.symmetry = IDS_SYMMETRY_COMMUTATIVE;
    if (ids_ctx_create(NULL, &ctx) != IDS_OK) {
        return EXIT_FAILURE;
    }
    if (ids_signature_create(ctx, &product, 1, &signature) != IDS_OK ||
        ids_types_create(ctx, signature, 4, &types) != IDS_OK) {
        fprintf(stderr, "%s\n", ids_ctx_message(ctx));
        goto done;
    }
    /* ((ab)c)d and (ab)(cd): the Wedderburn-Etherington number of 4 leaves, OEIS A001190 */
    if (ids_types_count(types, 4) == 2) {
        status = EXIT_SUCCESS;
    }
done:
    ids_types_free(types);
    ids_signature_free(signature);
    ids_ctx_free(ctx);
    return status;
}
