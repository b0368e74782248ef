import type { LegView } from "@/domain/junction";
import { formatSeconds } from "@/ui/format";

/** Mean delay of a leg in words; a figure that is neither ranked nor published is told as such. */
export function legDelayWords({ delay, evidence }: Pick<LegView, "delay" | "evidence">, locale: string): string {
  if (delay === null) return "no figure";
  const words = `${formatSeconds(delay.value, locale)} delay`;
  return evidence === "none" ? `${words}, no evidence` : words;
}
