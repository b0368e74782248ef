/** Queries as the address of a page holds them. Free of zod: every page of the browser reads addresses. */

export type RawParams = Record<string, string | string[] | undefined>;

/** One field of a query. */
export interface Field<T> {
  /** Undefined for a text that is no value of the field. */
  read: (text: string) => T | undefined;
  /** What is meant where the address says nothing, or nothing that can be read. */
  usual: T;
}

export type Fields<Q> = { readonly [K in keyof Q]-?: Field<Q[K]> };

/** A hand-edited address never breaks the page: fields that fail fall back to what is usual. */
export function readAddress<Q extends object>(fields: Fields<Q>, params: RawParams): Q {
  const query: Partial<Q> = {};
  for (const key of keysOf(fields)) {
    const given = params[key];
    const text = Array.isArray(given) ? given[0] : given;
    const value = text === undefined ? undefined : fields[key].read(text);
    query[key] = value ?? fields[key].usual;
  }
  return query as Q;
}

/** Leaves out what is usual, so that two people who look at the same thing have the same address. */
export function writeAddress<Q extends object>(fields: Fields<Q>, query: Q): URLSearchParams {
  const params = new URLSearchParams();
  for (const key of keysOf(fields)) {
    const value = query[key];
    if (value !== undefined && value !== fields[key].usual) params.set(key, String(value));
  }
  return params;
}

export function usualOf<Q extends object>(fields: Fields<Q>): Q {
  return readAddress(fields, {});
}

function keysOf<Q extends object>(fields: Fields<Q>): Extract<keyof Q, string>[] {
  return Object.keys(fields) as Extract<keyof Q, string>[];
}

export function oneOf<T extends string>(values: readonly T[]): Field<T | undefined>["read"] {
  return (text) => values.find((value) => value === text);
}

export function numberWithin(min: number, max: number, step?: number): Field<number | undefined>["read"] {
  return (text) => {
    const value = Number(text);
    return value >= min && value <= max && (step === undefined || value % step === 0) ? value : undefined;
  };
}

export function textUpTo(length: number): Field<string | undefined>["read"] {
  return (text) => (text.trim().length <= length ? text.trim() : undefined);
}

/** A day that the calendar has, as 2026-03-01. */
export function isoDate(text: string): string | undefined {
  const at = /^\d{4}-\d\d-\d\d$/.test(text) ? Date.parse(`${text}T00:00:00Z`) : NaN;
  return Number.isFinite(at) && new Date(at).toISOString().startsWith(text) ? text : undefined;
}
