/** Seeded numbers for made recordings. */
export interface SeededRandom {
  /** Uniform in (0, 1). */
  uniform(): number;
  /** Standard normal. */
  normal(): number;
}

/**
 * xoshiro128** (Blackman & Vigna 2018, "Scrambled linear pseudorandom number generators") seeded by splitmix32;
 * normal numbers by Box & Muller 1958, two at a time.
 */
export function seededRandom(seed: number): SeededRandom {
  let mixer = seed | 0;
  const mix = () => {
    mixer = (mixer + 0x9e3779b9) | 0;
    let z = mixer;
    z = Math.imul(z ^ (z >>> 16), 0x21f0aaad);
    z = Math.imul(z ^ (z >>> 15), 0x735a2d97);
    return z ^ (z >>> 15);
  };
  let [a, b, c, d] = [mix(), mix(), mix(), mix()];
  const rotate = (x: number, k: number) => (x << k) | (x >>> (32 - k));
  const uniform = () => {
    const result = Math.imul(rotate(Math.imul(b, 5), 7), 9) >>> 0;
    const t = b << 9;
    c ^= a;
    d ^= b;
    b ^= c;
    a ^= d;
    c ^= t;
    d = rotate(d, 11);
    return (result + 0.5) / 4294967296;
  };
  let spare: number | null = null;
  const normal = () => {
    if (spare !== null) {
      const value = spare;
      spare = null;
      return value;
    }
    const radius = Math.sqrt(-2 * Math.log(uniform()));
    const angle = 2 * Math.PI * uniform();
    spare = radius * Math.sin(angle);
    return radius * Math.cos(angle);
  };
  return { uniform, normal };
}
