import fc from 'fast-check';

// The same cases in every run; another seed may be tried by hand.
fc.configureGlobal({ seed: Number(process.env.FAST_CHECK_SEED ?? 20261201) });

/** Uniform over the range: fc.double spreads over bit patterns and rarely visits the top of it. */
export const between = (min: number, max: number): fc.Arbitrary<number> =>
  fc.nat(1e6).map((i) => min + ((max - min) * i) / 1e6);
