import { signedTurnDeg } from "@/core/geometry/angles";
import type { StreetGraph } from "@/core/match/graph";
import { MATCHING } from "@/core/match/matching";

/** Ways from one link's stop line to the beginnings of other links. */
export interface Routes {
  /** Row of a target link in the columns below. */
  row: Map<number, number>;
  link: number[];
  /** Metres from the stop line to position 0 of the target. */
  wayM: number[];
  /** Cost of the junctions passed. */
  cost: number[];
  /** Row of the way's last link before the target, -1 for the first step. */
  previous: number[];
  junctions: number[];
}

const UTURN_DEG = 155;

/** Caches, for each link, the cheapest ways onward within MATCHING.routeMostM. */
export function createRouter(graph: StreetGraph): (link: number) => Routes {
  const cache: (Routes | undefined)[] = new Array<Routes | undefined>(graph.count);
  return (link) => (cache[link] ??= searchRoutes(graph, link));
}

/** Dijkstra over whole links; small frontiers, so the next one is found by scanning. */
function searchRoutes(graph: StreetGraph, from: number): Routes {
  const found: Routes = { row: new Map(), link: [], wayM: [], cost: [], previous: [], junctions: [] };
  const done: boolean[] = [];
  extend(graph, found, from, -1, 0, 0, 0);
  for (;;) {
    let next = -1;
    for (let r = 0; r < found.link.length; r++) if (!done[r] && (next < 0 || found.wayM[r] < found.wayM[next])) next = r;
    if (next < 0) return found;
    done[next] = true;
    const reached = found.wayM[next] + graph.stopAt[found.link[next]];
    if (reached > MATCHING.routeMostM || found.junctions[next] >= MATCHING.routeMostJunctions) continue;
    extend(graph, found, found.link[next], next, reached, found.cost[next], found.junctions[next]);
  }
}

function extend(graph: StreetGraph, found: Routes, link: number, row: number, wayM: number, cost: number, junctions: number): void {
  const leg = graph.leg[link];
  if (leg < 0) return;
  const { legs, exits } = graph.network;
  for (const exit of graph.exitsOfJunction[legs[leg].junction]) {
    const turn = Math.abs(signedTurnDeg(legs[leg].bearingDeg, exits[exit].bearingDeg));
    const step = MATCHING.junctionCost + (turn > UTURN_DEG ? MATCHING.uturnCost : 0);
    const way = wayM + graph.boxWayM(leg, exit);
    for (const target of graph.linksOfExit[exit]) {
      const known = found.row.get(target);
      if (known === undefined) {
        found.row.set(target, found.link.length);
        found.link.push(target);
        found.wayM.push(way);
        found.cost.push(cost + step);
        found.previous.push(row);
        found.junctions.push(junctions + 1);
      } else if (way < found.wayM[known]) {
        found.wayM[known] = way;
        found.cost[known] = cost + step;
        found.previous[known] = row;
        found.junctions[known] = junctions + 1;
      }
    }
  }
}

/** Links passed between `from` and `to`, both left out, in order of travel. */
export function linksBetween(routes: Routes, to: number): number[] {
  const out: number[] = [];
  let row = routes.previous[routes.row.get(to) as number];
  while (row >= 0) {
    out.push(routes.link[row]);
    row = routes.previous[row];
  }
  return out.reverse();
}
