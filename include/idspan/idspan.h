/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file idspan.h
 * The one header a user includes.
 */
/**
 * @mainpage
 * idspan computes with identities of nonassociative algebras: association types and multilinear
 * monomials, what follows from identities in each degree, and the modules of the symmetric groups
 * that are left.
 *
 * Everything starts with a context, ids_ctx_create(), which holds the allocator, the byte budget,
 * the progress hook and the explanation of the last failure. What can fail returns an #ids_status.
 * The library never ends the program, prints, reads the environment or keeps state outside of its
 * objects.
 *
 * From there: ids_presentation_read() reads operations and identities, ids_rank_table_create() and
 * ids_partition_table_create() find what they leave, ids_follows_decide() whether an identity
 * follows from others; ids_types_create(), ids_basis_create() and ids_iter_create() list monomials;
 * ids_writer_create() and ids_types_draw() write results.
 *
 * Words in the descriptions of parameters: *borrowed*, the call uses it until it returns; *kept*,
 * it must outlive the object that is made; *owned*, the caller frees it, with the function that is
 * named. Outputs are written only on IDS_OK, unless stated. Objects that are called immutable can
 * be shared between threads. *Border* names what can still end the process when the system, not
 * the byte budget, refuses memory: GMP and FLINT give no way to survive that.
 *
 * The four programs under "Examples" are complete.
 */
/**
 * @example enumerate.c
 * Counts and lists association types and monomials.
 */
/**
 * @example follows.c
 * Does an identity follow from others? Writes a derivation or a witness, and checks it.
 */
/**
 * @example ranks.c
 * A rank table with a progress hook that cancels.
 */
/**
 * @example budget.c
 * An allocator of the program's own, and a byte budget.
 */
#ifndef IDSPAN_IDSPAN_H
#define IDSPAN_IDSPAN_H

#include <idspan/algebra.h>
#include <idspan/answer.h>
#include <idspan/basis.h>
#include <idspan/core.h>
#include <idspan/draw.h>
#include <idspan/engine.h>
#include <idspan/follows.h>
#include <idspan/fresh.h>
#include <idspan/identity.h>
#include <idspan/model.h>
#include <idspan/render.h>
#include <idspan/report.h>
#include <idspan/run.h>
#include <idspan/tree.h>
#include <idspan/young.h>

#endif
