/**
 * Words in order. Up to 32 bits a word they stand in a Uint32Array, up to 64 in a BigUint64Array, past that in a
 * plain array of BigInts. Every word is below 2^w.
 */
export type Words = Uint32Array | BigUint64Array | readonly bigint[]
