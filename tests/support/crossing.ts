/** One junction with four straight legs and vehicles whose every move is known: pings for tests, made by hand. */
export const CROSSING = { id: "X1", name: "Cross Street / Long Road", lat: 45.6, lon: -38.3 };

const CRUISE_MS = 12;
const APPROACH_M = 420;
const LEAVE_M = 300;
const LANE_M = 2;
/** Metres for a degree at 45.6 N on the WGS 84 ellipsoid, good to a few centimetres over a leg. */
const PER_LAT = 111_143.5;
const PER_LON = 78_010.7;

export interface CrossingOptions {
  vehicles: number;
  /** Begin of the first trip. */
  startMs: number;
  /** Seconds between the starts of two vehicles. */
  everyS: number;
  pingS: number;
  /** Seconds that every second vehicle of a leg waits at the stop line. */
  waitS: number;
}

export const CROSSING_DEFAULTS: CrossingOptions = {
  vehicles: 240,
  startMs: Date.parse("2026-03-03T08:00:00Z"),
  everyS: 12,
  pingS: 5,
  waitS: 30,
};

export const JUNCTIONS_CSV = `junction_id,name,lat,lon,corridor,corridor_order,district,cycle_s\n${CROSSING.id},${CROSSING.name},${CROSSING.lat},${CROSSING.lon},Long Road,1,North,90\n`;

/** Vehicle v comes from leg v mod 4 and drives straight on; those with floor(v / 4) odd wait. */
export function crossingPings(options: Partial<CrossingOptions> = {}): string {
  const { vehicles, startMs, everyS, pingS, waitS } = { ...CROSSING_DEFAULTS, ...options };
  const lines = ["vehicle_id,timestamp,lat,lon,speed_kmh,heading"];
  for (let v = 0; v < vehicles; v++) {
    const bearing = (v % 4) * 90;
    const waits = Math.floor(v / 4) % 2 === 1;
    const stopAt = APPROACH_M - 16;
    const totalS = (APPROACH_M + LEAVE_M) / CRUISE_MS + (waits ? waitS : 0);
    for (let t = (v * 7) % pingS; t <= totalS; t += pingS) {
      const free = t * CRUISE_MS;
      const stopS = stopAt / CRUISE_MS;
      const along = !waits || t <= stopS ? free : Math.max(stopAt, (t - waitS) * CRUISE_MS);
      const standing = waits && t > stopS && t < stopS + waitS;
      lines.push(lineOf(`v${v}`, startMs + (v * everyS + t) * 1000, bearing, along - APPROACH_M, standing ? 0 : CRUISE_MS));
    }
  }
  return `${lines.join("\n")}\n`;
}

function lineOf(vehicle: string, tMs: number, bearingDeg: number, alongM: number, speedMs: number): string {
  const angle = (bearingDeg * Math.PI) / 180;
  const east = alongM * Math.sin(angle) + LANE_M * Math.cos(angle);
  const north = alongM * Math.cos(angle) - LANE_M * Math.sin(angle);
  const lat = CROSSING.lat + north / PER_LAT;
  const lon = CROSSING.lon + east / PER_LON;
  return [vehicle, tMs, lat.toFixed(7), lon.toFixed(7), (speedMs * 3.6).toFixed(1), bearingDeg].join(",");
}
