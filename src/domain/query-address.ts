import { TURNS } from "@/core/types";
import { isoDate, numberWithin, oneOf, readAddress, textUpTo, usualOf, writeAddress, type Fields, type RawParams } from "./address";
import type { StripQuery, WhenQuery } from "./junction";
import { PERIOD_KEYS } from "./periods";
import type { ScreenQuery } from "./screen";
import { DAY_TYPES, EVIDENCE_FLOORS, PATHS, SMOOTHING, SORT_KEYS, STRIP_SHAPES } from "./screen-choices";

/** The same queries as the schemas `ScreenQuery`, `WhenQuery` and `StripQuery`, read from and written to an address. */

const quarter = numberWithin(0, 1440, 15);
const ANY_TURN = { read: oneOf(["any", ...TURNS] as const), usual: "any" } as const;

const WHEN_FIELDS: Fields<WhenQuery> = {
  period: { read: oneOf(PERIOD_KEYS), usual: "pm" },
  from: { read: quarter, usual: undefined },
  to: { read: quarter, usual: undefined },
  days: { read: oneOf(DAY_TYPES), usual: "weekdays" },
  since: { read: isoDate, usual: undefined },
  until: { read: isoDate, usual: undefined },
};

const SCREEN_FIELDS: Fields<ScreenQuery> = {
  ...WHEN_FIELDS,
  turn: ANY_TURN,
  minDelay: { read: numberWithin(0, 600), usual: 0 },
  minSpill: { read: numberWithin(0, 100), usual: 0 },
  evidence: { read: oneOf(EVIDENCE_FLOORS), usual: "thin" },
  corridor: { read: numberWithin(1, Number.MAX_SAFE_INTEGER, 1), usual: undefined },
  q: { read: textUpTo(80), usual: "" },
  sort: { read: oneOf(SORT_KEYS), usual: "rank" },
  dir: { read: oneOf(["asc", "desc"]), usual: undefined },
};

const STRIP_FIELDS: Fields<StripQuery> = {
  ...WHEN_FIELDS,
  day: { read: isoDate, usual: undefined },
  turn: ANY_TURN,
  shape: { read: oneOf(STRIP_SHAPES), usual: "waves" },
  wave: { read: numberWithin(10, 20), usual: 15 },
  cellM: { read: numberWithin(5, 50), usual: 10 },
  cellS: { read: numberWithin(5, 900), usual: 120 },
  smooth: { read: oneOf(SMOOTHING), usual: "off" },
  paths: { read: oneOf(PATHS), usual: "hidden" },
};

export const USUAL_SCREEN: Readonly<ScreenQuery> = usualOf(SCREEN_FIELDS);
export const USUAL_STRIP: Readonly<StripQuery> = usualOf(STRIP_FIELDS);

export function screenQueryFromParams(params: RawParams): ScreenQuery {
  return withWholeWindow(readAddress(SCREEN_FIELDS, params));
}

export function screenQueryToParams(query: ScreenQuery): URLSearchParams {
  return writeAddress(SCREEN_FIELDS, query);
}

export function whenQueryFromParams(params: RawParams): WhenQuery {
  return withWholeWindow(readAddress(WHEN_FIELDS, params));
}

/** Of a wider query the part that says when. */
export function whenQueryToParams(query: WhenQuery): URLSearchParams {
  return writeAddress(WHEN_FIELDS, query);
}

export function stripQueryFromParams(params: RawParams): StripQuery {
  return withWholeWindow(readAddress(STRIP_FIELDS, params));
}

export function stripQueryToParams(query: StripQuery): URLSearchParams {
  return writeAddress(STRIP_FIELDS, query);
}

/** Half a window, or one that ends before it begins, is none. */
function withWholeWindow<Q extends WhenQuery>(query: Q): Q {
  const isWhole = query.from !== undefined && query.to !== undefined && query.from < query.to;
  return isWhole ? query : { ...query, from: undefined, to: undefined };
}
