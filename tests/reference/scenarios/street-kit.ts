import { innerEdges, markLanes } from "./connections";
import type { ConnectionSpec, Demand, EdgeSpec, NodeSpec } from "./types";

export interface StreetOptions {
  lanes?: number;
  speedMs?: number;
  /** Inner vertices in the direction first to second. */
  shape?: [number, number][];
  /** Half the distance between the two carriageways of a dual carriageway, metres. */
  medianM?: number;
  priority?: number;
}

/** Lays streets part by part; every part has a demand of its own, so unconnected parts can share one scenario. */
export class StreetKit {
  readonly nodes: NodeSpec[] = [];
  readonly edges: EdgeSpec[] = [];
  readonly demand: Demand[] = [];

  constructor(
    private readonly originX = 0,
    private readonly originY = 0,
  ) {}

  at(originX: number, originY: number): StreetKit {
    const part = new StreetKit(originX, originY);
    Object.assign(part, { nodes: this.nodes, edges: this.edges, demand: this.demand });
    return part;
  }

  node(id: string, x: number, y: number, kind: NodeSpec["kind"], controller?: string): string {
    this.nodes.push({ id, x: x + this.originX, y: y + this.originY, kind, controller });
    return id;
  }

  oneWay(from: string, to: string, options: StreetOptions = {}): string {
    const id = `${from}_${to}`;
    const shape = options.shape?.map(([x, y]): [number, number] => [x + this.originX, y + this.originY]);
    this.edges.push({
      id, from, to, lanes: options.lanes ?? 2, speedMs: options.speedMs ?? 13.89, shape, priority: options.priority,
    });
    return id;
  }

  twoWay(first: string, second: string, options: StreetOptions = {}): void {
    const back = options.shape && [...options.shape].reverse();
    const there = this.oneWay(first, second, options);
    const again = this.oneWay(second, first, { ...options, shape: back });
    if (options.medianM) for (const id of [there, again]) this.shiftAside(id, options.medianM);
  }

  /** Moves a straight edge to its own side of the street's centre line. */
  private shiftAside(id: string, byM: number): void {
    const edge = this.edges.find((candidate) => candidate.id === id);
    const [from, to] = [edge?.from, edge?.to].map((nodeId) => this.nodes.find((node) => node.id === nodeId));
    if (!edge || !from || !to) throw new RangeError(`Street ${id} has no ends.`);
    const lengthM = Math.hypot(to.x - from.x, to.y - from.y);
    const [ex, ey] = [(to.x - from.x) / lengthM, (to.y - from.y) / lengthM];
    const point = (node: NodeSpec, along: number): [number, number] => [
      node.x + ey * byM + ex * along,
      node.y - ex * byM + ey * along,
    ];
    edge.shape = [point(from, 0), point(to, 0)];
    edge.ownEnds = true;
  }

  /** Vehicles per hour in by each street end, and out by the same weights; names of one-way streets may be left out. */
  traffic(perHour: Record<string, number>, inner: boolean): void {
    const entries: Record<string, number> = {};
    const exits: Record<string, number> = {};
    for (const [end, flow] of Object.entries(perHour)) {
      for (const edge of this.edges) {
        if (edge.from === end) entries[edge.id] = flow;
        if (edge.to === end) exits[edge.id] = flow;
      }
    }
    const own = new Set(this.reachable(Object.keys(perHour)));
    const edges = this.edges.filter((edge) => own.has(edge.from));
    this.demand.push({ entries, exits, inner: inner ? innerEdges(this.nodes, edges) : [] });
  }

  private reachable(ends: string[]): string[] {
    const seen = new Set(ends);
    for (const node of seen) for (const edge of this.edges) if (edge.from === node) seen.add(edge.to);
    return [...seen];
  }

  links(driveSide: "left" | "right"): ConnectionSpec[] {
    return markLanes(this.nodes, this.edges, driveSide);
  }
}
