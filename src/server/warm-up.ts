import { ScreenQuery } from "@/domain/screen";
import { rankJunctions } from "@/services/screens/rank-junctions";
import { contextOf } from "./runtime";

/** Takes the days of the screen that people see first into memory before anybody asks. What goes wrong here is told to the first who asks. */
export async function warmUp(): Promise<void> {
  try {
    await rankJunctions(contextOf({ type: "job", job: "warm-up" }), ScreenQuery.parse({}));
  } catch {
    // The database may be on its way.
  }
}
