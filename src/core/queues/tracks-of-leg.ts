import { joinedTails } from "./joined-tails";
import type { LegView } from "./moments";
import type { QueueOptions } from "./options";
import { quartersSeen, speaksUntil, type Presence } from "./presence";
import { addStandings, standingsOf, stopsOfTrack, type Standing, type TrackColumns } from "./standings";
import { columnOptions, seenPerMetre } from "./unseen-tail";

/** A vehicle has left the leg where it is this far past the stop line: nobody stands there. */
const LEFT_M = -15;

/**
 * Tracks `from` to `to`, all of one leg, ready for `eachMoment`: the same reading of a queue as the stored quarters,
 * for those who have tracks and no network. O(points + tracks × log).
 */
export function viewOfTracks(tracks: TrackColumns, from: number, to: number, storageM: number, options: QueueOptions): LegView {
  const found: Standing[] = [];
  const spans: { fromMs: number; toMs: number }[] = [];
  for (let i = from; i < to; i++) {
    addStandings(found, stopsOfTrack(tracks, i, options), 0, spans.length, storageM, options);
    const first = tracks.trackOffset[i];
    const end = tracks.trackOffset[i + 1];
    if (first === end) continue;
    let last = first;
    while (last + 1 < end && tracks.trackS[last] > LEFT_M) last++;
    spans.push({ fromMs: tracks.enterMs[i] + tracks.trackT[first] * 1000, toMs: tracks.enterMs[i] + tracks.trackT[last] * 1000 });
  }
  const standings = standingsOf(found);
  const untilMs = speaksUntil(standings, spans.map((span) => span.toMs), options);
  const order = spans.map((_, i) => i).sort((a, b) => spans[a].fromMs - spans[b].fromMs);
  const presence: Presence = {
    offset: Uint32Array.of(0, spans.length),
    fromMs: Float64Array.from(order, (i) => spans[i].fromMs),
    toMs: Float64Array.from(order, (i) => spans[i].toMs),
    untilMs: Float64Array.from(order, (i) => untilMs[i]),
    isOpen: new Uint8Array(spans.length),
  };
  const [perMetre] = seenPerMetre(standings, Uint32Array.of(0, standings.length), options);
  return {
    storageM, perMetre, standings, standingFrom: 0, standingTo: standings.length,
    tails: joinedTails(standings, 0, standings.length, columnOptions(options, perMetre)), tailFrom: 0,
    presence, presenceAll: 0, presenceFrom: 0, presenceTo: spans.length, seenQuarters: quartersSeen(presence),
  };
}
