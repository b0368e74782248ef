import type { JunctionField, RejectReason } from "@/domain/upload";
import { isPosition } from "../fields";

export interface JunctionRow {
  id: string;
  name: string;
  lat: number;
  lon: number;
  corridor: string | null;
  corridorOrder: number | null;
  district: string | null;
  cycleS: number | null;
  /** Calendar day, YYYY-MM-DD. */
  lastRetimed: string | null;
  notes: string | null;
}

export interface JudgedJunction {
  junction: JunctionRow;
  reason: RejectReason | null;
  /** Optional fields that hold something which cannot be read. */
  unread: JunctionField[];
}

const MAX_NAME_CHARS = 200;
const MAX_NOTES_CHARS = 2000;
const MAX_CYCLE_S = 600;

export function junctionFromTexts(texts: Record<JunctionField, string>, decimal: "." | ","): JudgedJunction {
  const lat = numberFrom(texts.lat, decimal);
  const lon = numberFrom(texts.lon, decimal);
  const corridorOrder = numberFrom(texts.corridor_order, decimal);
  const cycleS = numberFrom(texts.cycle_s, decimal);
  const lastRetimed = dateFrom(texts.last_retimed);
  const hasCycle = cycleS > 0 && cycleS <= MAX_CYCLE_S;
  const unread: JunctionField[] = [];
  if (texts.corridor_order !== "" && Number.isNaN(corridorOrder)) unread.push("corridor_order");
  if (texts.cycle_s !== "" && !hasCycle) unread.push("cycle_s");
  if (texts.last_retimed !== "" && lastRetimed === null) unread.push("last_retimed");
  return {
    junction: {
      id: texts.junction_id,
      name: texts.name,
      lat,
      lon,
      corridor: shortText(texts.corridor, MAX_NAME_CHARS),
      corridorOrder: Number.isNaN(corridorOrder) ? null : corridorOrder,
      district: shortText(texts.district, MAX_NAME_CHARS),
      cycleS: hasCycle ? cycleS : null,
      lastRetimed,
      notes: shortText(texts.notes, MAX_NOTES_CHARS),
    },
    reason: isName(texts.junction_id) && isName(texts.name) ? (isPosition(lat, lon) ? null : "position") : "name",
    unread,
  };
}

function isName(text: string): boolean {
  return text !== "" && text.length <= MAX_NAME_CHARS;
}

function shortText(text: string, maxChars: number): string | null {
  return text === "" ? null : text.slice(0, maxChars);
}

function numberFrom(text: string, decimal: "." | ","): number {
  const plain = decimal === "," ? text.replace(",", ".") : text;
  return /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(plain) ? Number(plain) : NaN;
}

/** `2026-03-02`, `2026/03/02` or `02.03.2026`. */
function dateFrom(text: string): string | null {
  const yearFirst = /^(\d{4})[-/](\d{1,2})[-/](\d{1,2})(?:[T ].*)?$/.exec(text);
  const dayFirst = /^(\d{1,2})\.(\d{1,2})\.(\d{4})$/.exec(text);
  const parts = yearFirst ? yearFirst.slice(1) : dayFirst?.slice(1).reverse();
  if (parts === undefined) return null;
  const [year, month, day] = parts.map(Number);
  const date = new Date(Date.UTC(year, month - 1, day));
  const isReal = year >= 1900 && date.getUTCMonth() === month - 1 && date.getUTCDate() === day;
  return isReal ? date.toISOString().slice(0, 10) : null;
}
