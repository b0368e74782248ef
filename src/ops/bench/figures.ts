import { cpus, totalmem } from "node:os";

/** One measured figure beside the bound or the alternative that was measured in the same run. */
export interface Figure {
  name: string;
  value: number;
  unit: string;
  /** What it is compared with, its own value included. */
  against: string;
  /** Value by the other value, in the same unit. */
  ratio: number;
}

/** To three digits; a bound that is a whole number stays as it is. */
const rounded = (value: number) => (Number.isInteger(value) ? value : Number(value.toPrecision(3)));

/** A figure whose ratio is to `other`, which `label` names. */
export function figure(name: string, value: number, unit: string, label: string, other: number): Figure {
  return { name, value: rounded(value), unit, against: `${label}: ${rounded(other)} ${unit}`, ratio: rounded(value / other) };
}

export function figureLine({ name, value, unit, against, ratio }: Figure): string {
  return `${name.padEnd(46)} ${String(value).padStart(9)} ${unit.padEnd(8)} x ${String(ratio).padEnd(8)} ${against}`;
}

/** The table for people, with the kind of machine it was measured on. */
export function figuresTable(figures: readonly Figure[], size: string): string {
  const [{ model }] = cpus();
  const machine = `${cpus().length} cores (${model.trim()}), ${Math.round(totalmem() / 2 ** 30)} GiB of memory, Node ${process.versions.node}`;
  const rows = figures.map(({ name, value, unit, against, ratio }) => `| ${name} | ${value} ${unit} | ${against} | ${ratio} |`);
  return [
    "# Bench",
    "",
    "Written by `npm run bench -- --write`. Every ratio is to what was measured beside it in the same run; seconds alone say more about the machine.",
    "",
    `Machine: ${machine}. Size: ${size}.`,
    "",
    "| figure | value | against | ratio |",
    "|---|---|---|---|",
    ...rows,
    "",
  ].join("\n");
}

export function secondsSince(startMs: number): number {
  return (performance.now() - startMs) / 1000;
}

/** Milliseconds that each run took. */
export async function timesOf<T>(items: readonly T[], run: (item: T) => Promise<unknown> | unknown): Promise<number[]> {
  const times: number[] = [];
  for (const item of items) {
    const startMs = performance.now();
    await run(item);
    times.push(performance.now() - startMs);
  }
  return times;
}

export const sum = (values: readonly number[]) => values.reduce((total, value) => total + value, 0);

/** The smallest of the values that 95 % do not exceed. */
export function p95(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.max(0, Math.ceil(sorted.length * 0.95) - 1)];
}
