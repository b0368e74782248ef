import type { City } from "./network/types";
import type { CityScale } from "./network/build-city";
import type { Period } from "./demand/pattern";
import type { NodeTiming } from "./signals/timing";
import { createRandomStream } from "./random";

export function demandCaps(city: City, _scale: CityScale, _period: Period, seed: number): Float64Array {
  const random = createRandomStream(seed, 29);
  return Float64Array.from(city.nodes, () => 0.55 + 0.28 * random.next());
}

export function spoilTimings(_city: City, _scale: CityScale, _period: Period, _timings: NodeTiming[], _flow: Float64Array): void {}
