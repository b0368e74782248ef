import type { RankedJunction } from "@/domain/screen";
import { counted, formatLength, formatShare, NO_FIGURE, type Units } from "@/ui/format";

const TURNING = { left: "turning left", through: "going through", right: "turning right", uturn: "making a U-turn" } as const;

/** "left from the south": the movement with its leg, as the table and the map name it. */
export function movementName(worst: NonNullable<RankedJunction["worst"]>): string {
  const turn = worst.turn === "uturn" ? "U-turn" : worst.turn;
  return `${turn} ${legPlace(worst.from)}`;
}

/** Where a leg comes from, out of its name: "From the south, northbound" is "from the south", and "Quay Street, slip" is "from Quay Street". */
export function legPlace(legName: string): string {
  const place = legName.split(",")[0];
  return /^from\b/i.test(place) ? `f${place.slice(1)}` : `from ${place}`;
}

/** Two to five short sentences that say why a junction stands where it stands, and how sure that is. */
export function explainJunction(row: RankedJunction, city: { units: Units; locale: string }): string {
  if (row.rank === null || row.delay === null) {
    const seen = row.vehicles === 0 ? "No vehicle was" : `Only ${counted(row.vehicles, "vehicle was", "vehicles were", city.locale)}`;
    return `${seen} seen here in these hours. That is no figure, and it does not mean no delay.`;
  }
  return [delaySentence(row), queueSentence(row, city), standingSentence(row), sampleSentence(row, city.locale)].filter(Boolean).join(" ");
}

function delaySentence({ delay, worst }: RankedJunction): string {
  if (!delay) return "";
  const [value, low, high] = [delay.value, delay.low, delay.high].map(Math.round);
  const mean = `A vehicle loses ${value} s on average${low === high ? "" : ` (${low} to ${high})`}`;
  return worst ? `${mean}; ${TURNING[worst.turn]} ${legPlace(worst.from)}, ${Math.round(worst.delayS)} s.` : `${mean}.`;
}

/** Upper ends below this share need no words. */
const UNSEEN_SPILL_TOLD = 0.05;

function queueSentence({ reachM, storageM, spill }: RankedJunction, { units, locale }: { units: Units; locale: string }): string {
  if (reachM === null) return "How far its queues reach, this sample cannot say.";
  const room = storageM ? ` of the ${formatLength(storageM, units, locale)} it has` : "";
  const reach = `On the fullest leg the queue reaches ${formatLength(reachM, units, locale)}${room} (95th percentile of what was seen)`;
  if (!spill || formatShare(spill.value, locale) === NO_FIGURE) return `${reach}.`;
  if (spill.value > 0) return `${reach} and spills back ${formatShare(spill.value, locale)} of the time.`;
  const mostly = spill.high >= UNSEEN_SPILL_TOLD ? `, though up to ${formatShare(spill.high, locale)} of the time could have gone unseen` : "";
  return `${reach}; no spillback was seen${mostly}.`;
}

function standingSentence({ rank, rankLow, rankHigh, delay, shrunkDelayS }: RankedJunction): string {
  const counts = delay && shrunkDelayS !== null && Math.round(delay.value) !== Math.round(shrunkDelayS);
  const shrunk = counts ? `For the rank it counts as ${Math.round(shrunkDelayS)} s, drawn towards the city’s mean by how few were seen` : "";
  if (rank === null || rankLow === null || rankHigh === null || rankLow === rankHigh) return shrunk && `${shrunk}.`;
  return `${shrunk ? `${shrunk}; with` : "With"} other vehicles in the sample the rank could be anything from ${rankLow} to ${rankHigh}.`;
}

function sampleSentence({ vehicles, days, evidence }: RankedJunction, locale: string): string {
  const sample = `${counted(vehicles, "vehicle", "vehicles", locale)} seen on ${counted(days, "day", "days", locale)}`;
  return `${sample}: ${evidence} evidence.`;
}
