const MODULUS = 2147483647;

/** Uniform numbers in (0, 1), the same on every machine: n ← 16807·n mod 2³¹−1 (Park & Miller 1988, Communications of the ACM 31:1192). */
export function uniformNumbers(start: number): () => number {
  let state = start;
  return () => {
    state = (16807 * state) % MODULUS;
    return state / MODULUS;
  };
}
