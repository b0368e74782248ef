import { applyScreenFilter } from "@/domain/screen-filter";
import { ScreenQuery, type RankedJunction, type ScreenResult } from "@/domain/screen";
import { clockText } from "@/domain/local-time";
import { csvText } from "@/formats/csv/write-csv";
import { requirePermission, type Context } from "../context";
import { rankCity } from "./rank-junctions";

const HEADER = [
  "rank",
  "rank_low_95",
  "rank_high_95",
  "junction_id",
  "name",
  "corridor",
  "lat_deg",
  "lon_deg",
  "worst_movement",
  "mean_delay_s_per_veh",
  "mean_delay_low_95_s",
  "mean_delay_high_95_s",
  "median_delay_s",
  "p95_delay_s",
  "level_of_service",
  "delay_of_vehicles_seen_h",
  "stops_per_vehicle",
  "reach_p95_m",
  "storage_m",
  "spillback_share_of_time_percent",
  "vehicles_seen",
  "days_seen",
  "evidence",
  "days",
  "period",
  "movements",
  "first_date",
  "last_date",
  "method_version",
];

const round = (value: number | null | undefined, digits: number): number | null =>
  value === null || value === undefined ? null : Number(value.toFixed(digits));

/** Each row says what it is of, so that two files are told apart. */
export function screenCsv(rows: readonly RankedJunction[], basis: ScreenResult["basis"], query: Pick<ScreenQuery, "days" | "turn">): AsyncGenerator<string> {
  const period = `${clockText(basis.fromMin)}-${clockText(basis.toMin)}`;
  return csvText(
    HEADER,
    rows.map((row) => [
      row.rank ?? null,
      row.rankLow ?? null,
      row.rankHigh ?? null,
      row.code,
      row.name,
      row.corridor ?? null,
      round(row.lat, 6),
      round(row.lon, 6),
      row.worst ? `${row.worst.turn} ${row.worst.from}` : null,
      round(row.delay?.value, 1),
      round(row.delay?.low, 1),
      round(row.delay?.high, 1),
      round(row.medianS, 1),
      round(row.p95S, 1),
      row.los?.at ?? null,
      round(row.hoursSeen, 2),
      round(row.stopsPerVehicle, 2),
      round(row.reachM, 0),
      round(row.storageM, 0),
      round(row.spill && row.spill.value * 100, 1),
      row.vehicles,
      row.days,
      row.evidence,
      query.days ?? null,
      period,
      query.turn ?? null,
      basis.firstDate ?? null,
      basis.lastDate ?? null,
      basis.methodVersion,
    ]),
  );
}

/** The list as the person sees it: the same filters, the same order. */
export async function exportScreen(ctx: Context, input: ScreenQuery): Promise<AsyncGenerator<string>> {
  requirePermission(ctx, "screen.export");
  const query = ScreenQuery.parse(input);
  const { rows, basis } = await rankCity(ctx, query);
  return screenCsv(applyScreenFilter(rows, query), basis, query);
}
