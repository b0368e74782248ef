import { createReadStream, readFileSync } from "node:fs";
import { createInterface } from "node:readline";

/** One vehicle's recorded second-by-second course; t in seconds from the start of the recording. */
export interface Course {
  id: string;
  t: number[];
  x: number[];
  y: number[];
  speedMs: number[];
  edge: string[];
  /** Metres from the start of the lane to the front bumper. */
  pos: number[];
  lane: number[];
  /** When it stopped for its own sake, as at a bus stop: from, to, seconds from the start of the recording. */
  dwells: [number, number][];
}

const VEHICLE = /<vehicle id="([^"]+)" x="([^"]+)" y="([^"]+)" .*?speed="([^"]+)" pos="([^"]+)" lane="([^"]+)"/;

/** Reads the simulator's floating-car output; seconds before `startS` are left out. */
export async function readTrajectories(path: string, startS: number): Promise<Map<string, Course>> {
  const courses = new Map<string, Course>();
  const edgeNames = new Map<string, [string, number]>();
  let t = 0;
  for await (const line of createInterface({ input: createReadStream(path, { highWaterMark: 1 << 20 }) })) {
    const step = /<timestep time="([^"]+)"/.exec(line);
    if (step) t = Number(step[1]) - startS;
    if (t < 0) continue;
    const found = VEHICLE.exec(line);
    if (!found) continue;
    const [, id, x, y, speed, pos, laneId] = found;
    let course = courses.get(id);
    if (!course) courses.set(id, (course = { id, t: [], x: [], y: [], speedMs: [], edge: [], pos: [], lane: [], dwells: [] }));
    let place = edgeNames.get(laneId);
    if (!place) {
      const cut = laneId.lastIndexOf("_");
      edgeNames.set(laneId, (place = [laneId.slice(0, cut), Number(laneId.slice(cut + 1))]));
    }
    course.t.push(t);
    course.x.push(Number(x));
    course.y.push(Number(y));
    course.speedMs.push(Number(speed));
    course.pos.push(Number(pos));
    course.edge.push(place[0]);
    course.lane.push(place[1]);
  }
  return courses;
}

/** Notes the stops that vehicles made for their own sake in their courses. */
export function readDwells(path: string, startS: number, courses: Map<string, Course>) {
  for (const [, head] of readFileSync(path, "utf8").matchAll(/<stopinfo ([^>]*)\/?>/g)) {
    const value = (name: string) => new RegExp(`(?:^|\\s)${name}="([^"]*)"`).exec(head)?.[1] ?? "";
    courses.get(value("id"))?.dwells.push([Number(value("started")) - startS, Number(value("ended")) - startS]);
  }
}
