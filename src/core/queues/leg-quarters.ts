import { NO_OPEN_TRACKS } from "@/core/traversals/open-tracks";
import type { LegQuarters, Network, OpenTracks, Traversals } from "@/core/types";
import { joinedTails } from "./joined-tails";
import { createScratch, type LegView } from "./moments";
import { DEFAULT_QUEUE_OPTIONS, QUARTER_MS, type QueueOptions } from "./options";
import { presenceByLeg, quartersSeen, type Presence } from "./presence";
import { quarterFigures, type QuarterFigures } from "./quarter-figures";
import { findStandings, standingsByLeg, type Standings } from "./standings";
import { columnOptions, seenPerMetre } from "./unseen-tail";

/**
 * Queue of each leg in each quarter of an hour (UTC; every city clock is off by whole quarters) in which the sample
 * saw the leg: reach of the standing column that hangs together with the stop line, seconds spilled back, seconds for
 * which the sample can say. A quarter in which vehicles passed and none stood has reach 0; one in which nobody was
 * seen, or only vehicles of open tracks, has no entry. `traversals` and `open` are all of the time span, in any order;
 * rows come in order of leg, then time.
 * O(traversals × log + moments with a queue × standing²).
 */
export function legQuarters(network: Network, traversals: Traversals, open: OpenTracks = NO_OPEN_TRACKS, options: Partial<QueueOptions> = {}): LegQuarters {
  const chosen: QueueOptions = { ...DEFAULT_QUEUE_OPTIONS, ...options };
  const standings = findStandings(network, traversals, chosen, open);
  const presence = presenceByLeg(network, traversals, standings, chosen, open);
  const perMetre = seenPerMetre(standings, standingsByLeg(standings, network.legs.length), chosen);
  return quartersOfLegs(network, { standings, presence, perMetre, seenQuarters: quartersSeen(presence) }, chosen);
}

/** What the quarters of some legs rest on; density and quarters with traffic are the whole city's. */
export interface LegSights {
  standings: Standings;
  presence: Presence;
  /** Seen vehicles per metre of standing column, by leg. */
  perMetre: Float64Array;
  /** Starts of the quarters in which any vehicle came on any leg. */
  seenQuarters: ReadonlySet<number>;
}

/** Second half of `legQuarters`: legs may come in parts, each with all of its standings and spans. */
export function quartersOfLegs(network: Network, { standings, presence, perMetre, seenQuarters }: LegSights, chosen: QueueOptions = DEFAULT_QUEUE_OPTIONS): LegQuarters {
  const offset = standingsByLeg(standings, network.legs.length);
  const scratch = createScratch(standings.length);
  const rows: (QuarterFigures & { leg: number; startMs: number })[] = [];
  for (let leg = 0; leg < network.legs.length; leg++) {
    const view: LegView = {
      storageM: network.legs[leg].storageM,
      perMetre: perMetre[leg],
      standings,
      standingFrom: offset[leg],
      standingTo: offset[leg + 1],
      tails: joinedTails(standings, offset[leg], offset[leg + 1], columnOptions(chosen, perMetre[leg])),
      tailFrom: 0,
      presence,
      presenceAll: presence.offset[leg],
      presenceFrom: presence.offset[leg],
      presenceTo: presence.offset[leg + 1],
      seenQuarters,
    };
    for (const startMs of quartersOf(presence, leg)) {
      passOver(view, startMs, chosen);
      rows.push({ leg, startMs, ...quarterFigures(view, startMs, chosen, scratch) });
    }
  }
  return columnsOf(rows);
}

/** Moves the view past what was over, memory and sight included, before the quarter began: quarters come in order. */
function passOver(view: LegView, startMs: number, options: QueueOptions): void {
  const { standings, presence } = view;
  const standingMs = startMs - options.memoryS * 1000;
  while (view.standingFrom < view.standingTo && standings.toMs[view.standingFrom] < standingMs) view.standingFrom++;
  while (view.presenceFrom < view.presenceTo && presence.untilMs[view.presenceFrom] < startMs) view.presenceFrom++;
}

/** Starts of the quarters in which any vehicle that passed the stop line was on the leg, ascending. */
function quartersOf(presence: Presence, leg: number): number[] {
  const starts = new Set<number>();
  for (let k = presence.offset[leg]; k < presence.offset[leg + 1]; k++) {
    if (presence.isOpen[k] === 1) continue;
    const first = Math.floor(presence.fromMs[k] / QUARTER_MS) * QUARTER_MS;
    for (let start = first; start <= presence.toMs[k]; start += QUARTER_MS) starts.add(start);
  }
  return [...starts].sort((a, b) => a - b);
}

function columnsOf(rows: (QuarterFigures & { leg: number; startMs: number })[]): LegQuarters {
  return {
    length: rows.length,
    leg: Uint32Array.from(rows, (r) => r.leg),
    startMs: Float64Array.from(rows, (r) => r.startMs),
    reachM: Float32Array.from(rows, (r) => r.reachM),
    reachEstimateM: Float32Array.from(rows, (r) => r.reachEstimateM),
    spilledS: Float32Array.from(rows, (r) => r.spilledS),
    observedS: Float32Array.from(rows, (r) => r.observedS),
  };
}
