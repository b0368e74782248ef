/** A crossroads of two straight streets, 45.6 N 38.3 W, and vehicles that drive through it, for tests of the screen command. */
const LAT = 45.6;
const LON = -38.3;
const METRES_PER_DEGREE = 111_195;
const START_MS = Date.UTC(2026, 2, 2, 8, 0, 0);
const HALF_M = 420;
const SPEED_MS = 12;

export const JUNCTIONS_CSV = `junction_id,name,lat,lon\nX1,"Mill Lane, lower",${LAT},${LON}\n`;

export interface Drive {
  vehicle: string;
  /** Direction of travel, clockwise from true north. */
  bearingDeg: number;
  startS: number;
  /** How long it stands 25 m before the junction. */
  waitS: number;
}

/** Vehicles from all four sides, one a minute from each; every other one waits. */
export function drives(count: number, waitS: number): Drive[] {
  return Array.from({ length: count }, (_, i) => ({
    vehicle: `v${i}`,
    bearingDeg: (i % 4) * 90,
    startS: Math.floor(i / 4) * 60 + (i % 4) * 7,
    waitS: Math.floor(i / 4) % 2 === 0 ? 0 : waitS,
  }));
}

/** Rows of a pings file without its header, one ping every 2 s; 4 m to the right of the middle of the street. */
export function pingRows(list: readonly Drive[]): string[] {
  return list.flatMap((drive) => {
    const stopM = HALF_M - 25;
    const driveS = (2 * HALF_M) / SPEED_MS;
    const rows: string[] = [];
    for (let t = 0; t <= driveS + drive.waitS; t += 2) {
      const stopAtS = stopM / SPEED_MS;
      const isWaiting = drive.waitS > 0 && t > stopAtS && t < stopAtS + drive.waitS;
      const movedS = t <= stopAtS ? t : isWaiting ? stopAtS : t - drive.waitS;
      rows.push(pingRow(drive, t, movedS * SPEED_MS - HALF_M, isWaiting ? 0 : SPEED_MS));
    }
    return rows;
  });
}

export const PING_HEADER = "vehicle_id,timestamp,lat,lon,speed_kmh,heading";

function pingRow(drive: Drive, t: number, alongM: number, speedMs: number): string {
  const angle = (drive.bearingDeg * Math.PI) / 180;
  const east = Math.sin(angle) * alongM + Math.cos(angle) * 4;
  const north = Math.cos(angle) * alongM - Math.sin(angle) * 4;
  const lat = LAT + north / METRES_PER_DEGREE;
  const lon = LON + east / (METRES_PER_DEGREE * Math.cos((LAT * Math.PI) / 180));
  const time = new Date(START_MS + (drive.startS + t) * 1000).toISOString();
  return `${drive.vehicle},${time},${lat.toFixed(6)},${lon.toFixed(6)},${(speedMs * 3.6).toFixed(1)},${drive.bearingDeg}`;
}
