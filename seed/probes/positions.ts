import type { City } from "../network/types";
import { distanceM, type Point } from "../plane";
import type { LaneMap } from "../simulation/lanes";
import type { Recording } from "./recorder";

interface Track {
  x: Float64Array;
  y: Float64Array;
  alongM: Float64Array;
}

export interface Position {
  x: number;
  y: number;
  headingDeg: number;
}

export interface PathReader {
  /** Where on the plane a distance along the way is; distances must not fall from call to call. */
  at(distanceM: number, out: Position): void;
}

export interface Geometry {
  readPath(recording: Recording): PathReader;
}

const LANE_CHANGE_M = 22;

export function createGeometry(city: City, map: LaneMap): Geometry {
  const links = city.links.map((link) => trackOf(link.line));
  const movements = city.movements.map((movement) => trackOf(movement.line));
  return {
    readPath(recording) {
      const { pieces, pieceStartM } = recording;
      let piece = 0;
      let segment = 1;
      const lateralOf = (i: number): number => {
        if (i < 0 || i >= pieces.length) return NaN;
        return pieces[i] >= 0 ? map.lanes[pieces[i]].lateralM : NaN;
      };
      return {
        at(atM, out) {
          while (piece + 1 < pieces.length && pieceStartM[piece + 1] <= atM) {
            piece++;
            segment = 1;
          }
          const code = pieces[piece];
          const inM = atM - pieceStartM[piece];
          const track = code >= 0 ? links[map.lanes[code].link] : movements[-1 - code];
          const alongM = code >= 0 ? map.lanes[code].startM + inM : inM;
          while (segment + 1 < track.alongM.length && track.alongM[segment] < alongM) segment++;
          place(track, segment, alongM, lateral(code, inM, track), out);
        },
      };

      function lateral(code: number, inM: number, track: Track): number {
        const [before, after] = [lateralOf(piece - 1), lateralOf(piece + 1)];
        if (code < 0) {
          const share = inM / track.alongM[track.alongM.length - 1];
          const from = Number.isNaN(before) ? 0 : before;
          return from + ((Number.isNaN(after) ? from : after) - from) * Math.min(1, share);
        }
        const own = map.lanes[code].lateralM;
        if (Number.isNaN(before) || inM >= LANE_CHANGE_M) return own;
        return before + ((own - before) * inM) / LANE_CHANGE_M;
      }
    },
  };
}

function trackOf(line: readonly Point[]): Track {
  const alongM = new Float64Array(line.length);
  for (let i = 1; i < line.length; i++) alongM[i] = alongM[i - 1] + distanceM(line[i - 1], line[i]);
  return { x: Float64Array.from(line, (p) => p[0]), y: Float64Array.from(line, (p) => p[1]), alongM };
}

function place(track: Track, i: number, alongM: number, lateralM: number, out: Position): void {
  const dx = track.x[i] - track.x[i - 1];
  const dy = track.y[i] - track.y[i - 1];
  const stepM = track.alongM[i] - track.alongM[i - 1] || 1;
  const f = (alongM - track.alongM[i - 1]) / stepM;
  out.x = track.x[i - 1] + f * dx + (lateralM * dy) / stepM;
  out.y = track.y[i - 1] + f * dy - (lateralM * dx) / stepM;
  out.headingDeg = ((Math.atan2(dx, dy) * 180) / Math.PI + 360) % 360;
}
