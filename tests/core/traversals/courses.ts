import { createCourse, KNOTS, type Course } from "@/core/traversals/course";

/** A course of pings from rows of seconds, metres and km/h, on a street of the given free speed in m/s. */
export function courseOf(rows: [seconds: number, distance: number, kmh?: number][], freeMs = 14): Course {
  const course = createCourse(rows.length);
  course.length = rows.length;
  rows.forEach(([s, d, kmh], i) => {
    course.tMs[i] = s * 1000;
    course.distanceM[i] = d;
    course.speedMs[i] = kmh === undefined ? NaN : kmh / 3.6;
    course.freeMs[i] = freeMs;
    course.kind[i] = KNOTS.ping;
  });
  return course;
}
