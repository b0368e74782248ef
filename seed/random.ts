/** A stream of pseudo-random numbers that depends on nothing but its seed (sfc32 by C. Doty-Humphrey). */
export interface RandomStream {
  /** Uniform in [0, 1). */
  next(): number;
  /** Standard normal. */
  normal(): number;
}

export function createRandomStream(...seeds: number[]): RandomStream {
  let a = 0x9e3779b9;
  let b = 0x243f6a88;
  let c = 0xb7e15162;
  let d = 1;
  let spare = NaN;

  function next(): number {
    const t = (((a + b) | 0) + d) | 0;
    d = (d + 1) | 0;
    a = b ^ (b >>> 9);
    b = (c + (c << 3)) | 0;
    c = (c << 21) | (c >>> 11);
    c = (c + t) | 0;
    return (t >>> 0) / 4294967296;
  }

  function normal(): number {
    if (spare === spare) {
      const value = spare;
      spare = NaN;
      return value;
    }
    const radius = Math.sqrt(-2 * Math.log(1 - next()));
    const angle = 2 * Math.PI * next();
    spare = radius * Math.sin(angle);
    return radius * Math.cos(angle);
  }

  for (const seed of seeds) {
    a ^= seed | 0;
    b ^= Math.imul(seed | 0, 0x85ebca6b);
    for (let i = 0; i < 15; i++) next();
  }
  return { next, normal };
}

/** Index of the first entry of a rising cumulative table that exceeds `u` times its total. */
export function pickFromCumulative(cumulative: Float64Array, u: number): number {
  const target = u * cumulative[cumulative.length - 1];
  let low = 0;
  let high = cumulative.length - 1;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (cumulative[middle] > target) high = middle;
    else low = middle + 1;
  }
  return low;
}
