import { createRandomStream } from "../random";
import type { City } from "../network/types";

const SHORT_BLOCK_M = 215;

/** Degree of saturation that each junction's demand is held to; less where short blocks leave queues little room. */
export function saturationCaps(city: City, seed: number): Float64Array {
  const random = createRandomStream(seed, 29);
  return Float64Array.from(city.nodes, (node) => {
    const blockM = Math.min(...node.inbound.map((link) => city.links[link].lengthM));
    return (blockM < SHORT_BLOCK_M ? 0.46 : 0.55) + 0.25 * random.next();
  });
}
