// Floating point by the letter: include this file first, in every header and every source of the kernel.
//
// The kernel promises the same bits on every machine. A compiler may fuse a*b+c into one rounding where the
// machine has such an instruction, and the last bit then depends on the machine. The pragmas below turn this
// off from here to the end of the translation unit, also in builds that pass no flags of their own (an R
// package may not set -ffp-contract). Headers read before this one are not covered: hence "first".
//
// The result path uses + - * / sqrt floor fabs and moves of bits only, each of them exactly specified by
// IEEE 754, and takes the default rounding (to nearest, ties to even) for granted.
#pragma once

#if defined(__FAST_MATH__)
#error "folkmote needs IEEE arithmetic: build without -ffast-math"
#endif

#if defined(__clang__)
#pragma STDC FP_CONTRACT OFF
#elif defined(__GNUC__)
#pragma GCC optimize("fp-contract=off")
#endif

#if defined(__FLT_EVAL_METHOD__) && __FLT_EVAL_METHOD__ != 0
#error "folkmote needs doubles without excess precision (on 32-bit x86: -msse2 -mfpmath=sse)"
#endif
