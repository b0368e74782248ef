import { placeTimesInto } from "../simulation/path-times";
import { RING, RING_MASK, type LaneState, type Trips } from "../simulation/state";
import type { Passage } from "../simulation/traffic";
import type { City } from "../network/types";

/** The way of one vehicle: where it was when, as a line in time and distance, and over what it drove. */
export interface Recording {
  timeS: number[];
  distanceM: number[];
  /** Pieces of the way: a lane, or a movement across a junction coded as -1 - movement. */
  pieces: number[];
  pieceStartM: number[];
}

export interface Recorder {
  onPassage(lanes: LaneState, passage: Passage): void;
  /** Hands over the recording and forgets it. */
  take(trip: number): Recording | undefined;
}

export function createRecorder(city: City, trips: Trips): Recorder {
  const open = new Map<number, Recording>();
  const placeS = new Float64Array(RING);
  const pace = (trip: number): number => trips.pace[trip];

  return {
    onPassage(lanes, { trip, lane, place, exitS, movement }) {
      let recording = open.get(trip);
      const entryS = lanes.entryS[lane * RING + (place & RING_MASK)];
      if (!recording) {
        recording = { timeS: [entryS], distanceM: [0], pieces: [], pieceStartM: [] };
        open.set(trip, recording);
      }
      const startM = startOf(recording, city, entryS);
      recording.pieces.push(lane);
      recording.pieceStartM.push(startM);
      if (placeTimesInto(lanes, lane, place, pace, placeS)) addPlaces(recording, placeS, lanes, lane, startM);
      else addPoint(recording, exitS, startM + lanes.lengthM[lane]);
      if (movement >= 0) {
        recording.pieces.push(-1 - movement);
        recording.pieceStartM.push(startM + lanes.lengthM[lane]);
      }
    },
    take(trip) {
      const recording = open.get(trip);
      open.delete(trip);
      return recording;
    },
  };
}

/** Distance at which the next lane begins; closes a movement that was still open. */
function startOf(recording: Recording, city: City, entryS: number): number {
  const lastM = recording.distanceM[recording.distanceM.length - 1];
  const last = recording.pieces[recording.pieces.length - 1];
  if (last === undefined || last >= 0) return lastM;
  const startM = lastM + city.movements[-1 - last].lengthM;
  addPoint(recording, entryS, startM);
  return startM;
}

function addPoint(recording: Recording, timeS: number, distanceM: number): void {
  recording.timeS.push(timeS);
  recording.distanceM.push(distanceM);
}

function addPlaces(recording: Recording, placeS: Float64Array, lanes: LaneState, lane: number, startM: number): void {
  const places = lanes.places[lane];
  const spacingM = lanes.spacingM[lane];
  const stepS = spacingM / lanes.speedMs[lane];
  for (let j = places - 1; j >= 0; j--) {
    const atM = startM + (places - j) * spacingM;
    // Drives up to the place, then stands until it may leave it.
    const arriveS = placeS[j + 1] + stepS;
    if (placeS[j] - arriveS > 1) addPoint(recording, arriveS, atM);
    addPoint(recording, placeS[j], atM);
  }
}
