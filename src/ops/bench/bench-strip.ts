import { addTracks } from "@/core/strips/add-tracks";
import { createStrip, specOfWindow } from "@/core/strips/strip";
import { decodeTrackSet } from "@/core/strips/track-set";
import { StripQuery } from "@/domain/junction";
import { getTracks } from "@/services/strips/get-tracks";
import type { OpenContext } from "./bench-place";
import { figure, p95, timesOf, type Figure } from "./figures";

const BOUND_MS = 200;
const FRAME_MS = 1000 / 60;
const LEGS = 60;
const WAVES_KMH = [10, 11, 12, 13, 14, 15, 16, 17, 18, 19, 20];
/** The fourth week's Friday, counted from the Monday that the days begin with. */
const UNTIL = "2026-03-27";

/** Tracks of one leg over 20 pooled weekdays, and the strip drawn from them anew for each wave speed. */
export async function benchStrip({ ctx, database }: OpenContext): Promise<Figure[]> {
  const query = StripQuery.parse({ period: "all", days: "weekdays", until: UNTIL });
  const { rows } = await database.pool.query<{ id: number }>("select id from legs order by id limit $1", [LEGS + 1]);
  const [first, ...others] = rows.map((row) => row.id);
  const bytes = await getTracks(ctx, { legId: first, query });
  const times = await timesOf(others, (legId) => getTracks(ctx, { legId, query }));
  const bareTimes = await timesOf(others, (legId) => database.pool.query("select track from traversals where leg_id = $1", [legId]));
  const set = decodeTrackSet(bytes.buffer);
  if (set.tracks === 0) throw new Error("The generated leg has no tracks.");
  const window = { fromS: 0, toS: 86_400, bottomM: -20, topM: 350 };
  const drawn = await timesOf(WAVES_KMH, (kmh) => addTracks(createStrip(specOfWindow(window, query.cellS, query.cellM, kmh / 3.6)), set));
  return [
    figure("tracks of 20 pooled weekdays, p95", p95(times), "ms", "bound", BOUND_MS),
    figure("tracks of 20 pooled weekdays, p95", p95(times), "ms", "bare select of the leg's tracks", p95(bareTimes)),
    figure(`strip of ${set.tracks} tracks for a wave speed, p95`, p95(drawn), "ms", "one frame", FRAME_MS),
  ];
}
