/* SPDX-License-Identifier: BSD-2-Clause */
/**
 * @file idspan.h
 * The one header a user includes.
 */
#ifndef IDSPAN_IDSPAN_H
#define IDSPAN_IDSPAN_H

#include <idspan/algebra.h>
#include <idspan/answer.h>
#include <idspan/core.h>
#include <idspan/draw.h>
#include <idspan/engine.h>
#include <idspan/follows.h>
#include <idspan/identity.h>
#include <idspan/render.h>
#include <idspan/report.h>
#include <idspan/run.h>
#include <idspan/tree.h>
#include <idspan/young.h>

#endif
