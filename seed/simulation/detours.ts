import { waysTo, type Route } from "../demand/routes";
import type { City } from "../network/types";

/** Longest way round, in junctions. */
const MOST_MOVEMENTS = 60;

export interface Detours {
  /** The route with another movement at `hop`, then the quickest way to the same end; null where that leads nowhere. */
  via(route: Route, hop: number, movement: number): Route | null;
}

export function createDetours(city: City): Detours {
  const known = new Map<number, Int32Array>();
  return {
    via(route, hop, movement) {
      let next = known.get(route.lastLink);
      if (!next) {
        next = waysTo(city, route.lastLink);
        known.set(route.lastLink, next);
      }
      const movements = [...route.movements.slice(0, hop), movement];
      let link = city.movements[movement].to;
      while (link !== route.lastLink) {
        const step = next[link];
        if (step < 0 || movements.length > hop + MOST_MOVEMENTS) return null;
        movements.push(step);
        link = city.movements[step].to;
      }
      return { ...route, movements };
    },
  };
}
