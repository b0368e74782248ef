/** Uniform numbers in [0, 1). */
export type Random = () => number;

/** Seeded generator: Marsaglia's xorshift128 (2003), state filled from the seed by Weyl steps with a mixing function. Not for secrets. */
export function seededRandom(seed: number): Random {
  let weyl = seed >>> 0;
  const nextWord = (): number => {
    weyl = (weyl + 0x9e3779b9) >>> 0;
    let z = weyl;
    z = Math.imul(z ^ (z >>> 16), 0x85ebca6b);
    z = Math.imul(z ^ (z >>> 13), 0xc2b2ae35);
    return (z ^ (z >>> 16)) >>> 0;
  };
  let x = nextWord();
  let y = nextWord();
  let z = nextWord();
  let w = nextWord() | 1;
  return () => {
    const t = x ^ (x << 11);
    x = y;
    y = z;
    z = w;
    w = (w ^ (w >>> 19) ^ t ^ (t >>> 8)) >>> 0;
    return w / 4294967296;
  };
}

/** Standard normal numbers from uniform ones by the polar method of Marsaglia and Bray (1964). */
export function normalRandom(random: Random): Random {
  let spare = NaN;
  return () => {
    if (!Number.isNaN(spare)) {
      const value = spare;
      spare = NaN;
      return value;
    }
    let u = 0;
    let v = 0;
    let s = 0;
    while (s === 0 || s >= 1) {
      u = 2 * random() - 1;
      v = 2 * random() - 1;
      s = u * u + v * v;
    }
    const factor = Math.sqrt((-2 * Math.log(s)) / s);
    spare = v * factor;
    return u * factor;
  };
}
