import { readFileSync } from "node:fs";
import { join } from "node:path";
import { gunzipSync } from "node:zlib";

import type { Course } from "./simulator/read-trajectories";
import type { SampledCourse } from "./sampling";
import type { Passage, Truth } from "./truth/types";

/** What is kept of one scenario: enough to make every ping file and every score again without the simulator. */
export interface RecordedTruth {
  truth: Truth;
  /** The same figures from the noise-free courses of the sampled vehicles, by share in per cent. */
  oracle: Record<string, Truth>;
  /** Complete passages of the sampled vehicles. */
  passages: Passage[];
}

export interface Recording extends RecordedTruth {
  courses: SampledCourse[];
}

export const RECORDINGS = join(import.meta.dirname, "recordings");

/** Opens the kept recording of a scenario; throws where there is none. */
export function readRecording(scenarioId: string): Recording {
  const open = (name: string) => gunzipSync(readFileSync(join(RECORDINGS, `${scenarioId}.${name}.gz`)));
  const recorded: RecordedTruth = JSON.parse(new TextDecoder().decode(open("truth.json")));
  return { ...recorded, courses: decodeCourses(open("courses")) };
}

/** Courses cut where seconds are missing (the simulator moved the vehicle by hand). */
export function toSampledCourses(course: Course): SampledCourse[] {
  const parts: SampledCourse[] = [];
  let from = 0;
  for (let i = 1; i <= course.t.length; i++) {
    const isLast = i === course.t.length;
    const jump = isLast ? 0 : Math.hypot(course.x[i] - course.x[i - 1], course.y[i] - course.y[i - 1]);
    if (!isLast && course.t[i] - course.t[i - 1] < 1.5 && jump < 45) continue;
    parts.push({
      id: course.id,
      startS: course.t[from],
      x: Float64Array.from(course.x.slice(from, i)),
      y: Float64Array.from(course.y.slice(from, i)),
    });
    from = i;
  }
  return parts;
}

const UNIT_M = 0.1;

/** Courses as second differences of decimetres in variable-length integers: near zero most of the time, so they compress well. */
export function encodeCourses(courses: SampledCourse[]): Uint8Array {
  const bytes: number[] = [];
  const text = (value: string) => {
    const encoded = new TextEncoder().encode(value);
    unsigned(bytes, encoded.length);
    bytes.push(...encoded);
  };
  unsigned(bytes, courses.length);
  for (const course of courses) {
    text(course.id);
    unsigned(bytes, Math.round(course.startS));
    unsigned(bytes, course.x.length);
    for (const axis of [course.x, course.y]) {
      let before = 0;
      let stepBefore = 0;
      for (const value of axis) {
        const now = Math.round(value / UNIT_M);
        const step = now - before;
        signed(bytes, step - stepBefore);
        before = now;
        stepBefore = step;
      }
    }
  }
  return Uint8Array.from(bytes);
}

export function decodeCourses(bytes: Uint8Array): SampledCourse[] {
  let at = 0;
  const read = () => {
    let value = 0;
    let scale = 1;
    while (true) {
      const byte = bytes[at++];
      value += (byte & 127) * scale;
      if (byte < 128) return value;
      scale *= 128;
    }
  };
  const readSigned = () => {
    const value = read();
    return value % 2 === 0 ? value / 2 : -(value + 1) / 2;
  };
  const axis = (length: number) => {
    const values = new Float64Array(length);
    let position = 0;
    let step = 0;
    for (let i = 0; i < length; i++) {
      step += readSigned();
      position += step;
      values[i] = position * UNIT_M;
    }
    return values;
  };
  return Array.from({ length: read() }, () => {
    const length = read();
    const id = new TextDecoder().decode(bytes.subarray(at, at + length));
    at += length;
    const startS = read();
    const seconds = read();
    return { id, startS, x: axis(seconds), y: axis(seconds) };
  });
}

function unsigned(bytes: number[], value: number) {
  while (value >= 128) {
    bytes.push((value % 128) | 128);
    value = Math.floor(value / 128);
  }
  bytes.push(value);
}

function signed(bytes: number[], value: number) {
  unsigned(bytes, value >= 0 ? value * 2 : -value * 2 - 1);
}
