// Package precision holds the numbers that pictures are computed with: exact
// decimals as people and files write them (Decimal), doubles with an exponent of
// 64 bits (Ext), elementary functions with the same bits on every machine (Log,
// Exp, Sin and their kin), and the planning of bits for arbitrary precision
// (Depth, BitsFor, BigLog and its kin).
//
// Code here that can decide a pixel is built from operations that IEEE 754
// defines to the last bit: + - * / sqrt, fused multiply-add, and operations on the
// bits themselves. A product that feeds a sum is written math.FMA(a, b, c) where
// it is fused and float64(a*b) + c where it is rounded first, never bare, because
// the compiler fuses bare ones on some machines and not on others.
//
// The package must not know of sets, frames, colours or files.
package precision
