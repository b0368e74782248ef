import type { Point } from "../plane";
import type { StreetClass } from "../plan/streets";

export type TurnName = "left" | "through" | "right";

/** A place where streets meet under signals, or the end of a street where vehicles enter and leave. */
export interface CityNode {
  index: number;
  /** Empty for gates. */
  id: string;
  name: string;
  point: Point;
  isGate: boolean;
  district: string;
  corridor: string;
  corridorOrder: number;
  /** Links that end and begin here. */
  inbound: number[];
  outbound: number[];
}

/** A piece of street between two nodes, both directions. */
export interface CityEdge {
  street: string;
  class: StreetClass;
  from: number;
  to: number;
  line: Point[];
  isOneWay: boolean;
}

/** One direction of travel of an edge. */
export interface CityLink {
  index: number;
  from: number;
  to: number;
  street: string;
  class: StreetClass;
  /** Where the wheels run: from the upstream junction's box to the stop line, beside the centreline. */
  line: Point[];
  lengthM: number;
  /** Direction of travel at the start and at the stop line. */
  startBearingDeg: number;
  endBearingDeg: number;
  speedMs: number;
  lanes: number;
  /** Length of the left-turn bay; 0 where there is none. */
  bayM: number;
  /** Vehicles may start and end trips half-way along. */
  hasAccess: boolean;
}

export interface CityMovement {
  index: number;
  node: number;
  from: number;
  to: number;
  turn: TurnName;
  turnDeg: number;
  /** Length of the path across the junction. */
  lengthM: number;
  speedMs: number;
  line: Point[];
}

export interface City {
  nodes: CityNode[];
  edges: CityEdge[];
  links: CityLink[];
  movements: CityMovement[];
  /** Movements that leave a link, by link. */
  movementsOf: number[][];
}
