import type { z } from "zod";
import { addTracks } from "@/core/strips/add-tracks";
import { drawableCellS } from "@/core/strips/cell-width";
import { cellCentre, createStrip, specOfWindow, speedsOf } from "@/core/strips/strip";
import { decodeTrackSet } from "@/core/strips/track-set";
import { clockText } from "@/domain/local-time";
import { csvText, type Cell } from "@/formats/csv/write-csv";
import { requirePermission, type Context } from "../context";
import { windowOf } from "../screens/score-city";
import { getSettings } from "../settings/get-settings";
import { getLegStrip } from "./get-leg-strip";
import { getTracks, GetTracks } from "./get-tracks";

const HEADER = [
  "cell_centre_s_after_local_midnight",
  "cell_centre_m_to_stop_line",
  "space_mean_speed_kmh",
  "time_spent_veh_s",
  "distance_travelled_veh_m",
  "vehicles_seen",
  "days_seen",
  "cell_width_s",
  "cell_height_m",
  "backward_wave_kmh",
  "days",
  "period",
  "movements",
  "first_date",
  "last_date",
  "method_version",
  "least_vehicles_in_a_cell",
];

/** A cell of one vehicle is a piece of that vehicle's path: exports hold aggregates. */
const LEAST_VEHICLES = 2;

/** The cells of a strip as the page draws them, one row each; cells in which fewer than two vehicles were seen are left out. */
export async function exportStrip(ctx: Context, input: z.input<typeof GetTracks>): Promise<AsyncGenerator<string>> {
  requirePermission(ctx, "strip.export");
  const { query } = GetTracks.parse(input);
  const view = await getLegStrip(ctx, input);
  const set = decodeTrackSet((await getTracks(ctx, input)).buffer);
  const { fromMin, toMin } = windowOf(await getSettings(ctx), query);
  const waveKmh = query.shape === "waves" ? query.wave : null;
  const window = { fromS: fromMin * 60, toS: toMin * 60, bottomM: 0, topM: view.leg.lengthM };
  const cellS = drawableCellS(query.cellS, window);
  const strip = createStrip(specOfWindow(window, cellS, query.cellM, waveKmh === null ? Infinity : waveKmh / 3.6));
  addTracks(strip, set);
  const speeds = speedsOf(strip);
  function* rows(): Generator<Cell[]> {
    for (let cell = 0; cell < speeds.length; cell++) {
      if (strip.vehicles[cell] < LEAST_VEHICLES) continue;
      const { tS, sM } = cellCentre(strip.spec, cell);
      yield [
        Math.round(tS * 10) / 10,
        sM,
        Math.round(speeds[cell] * 36) / 10,
        Math.round(strip.timeS[cell] * 10) / 10,
        Math.round(strip.distanceM[cell] * 10) / 10,
        strip.vehicles[cell],
        strip.days[cell],
        cellS,
        query.cellM,
        waveKmh,
        query.day === undefined ? query.days : "single",
        `${clockText(fromMin)}-${clockText(toMin)}`,
        query.turn,
        query.day ?? view.basis.firstDate,
        query.day ?? view.basis.lastDate,
        view.basis.methodVersion,
        LEAST_VEHICLES,
      ];
    }
  }
  return csvText(HEADER, rows());
}
