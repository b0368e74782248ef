import { readFile } from "node:fs/promises";
import { join } from "node:path";
import { gunzipSync } from "node:zlib";
import { Client } from "pg";

/** The file that one of the seeded uploads came from, as text. */
export async function seededFile(fileName: string): Promise<string> {
  const client = new Client({ connectionString: process.env.DATABASE_URL });
  await client.connect();
  try {
    const { rows } = await client.query<{ storage_key: string }>("select storage_key from uploads where file_name = $1", [fileName]);
    const bytes = await readFile(join(process.env.DATA_DIR ?? "", "storage", rows[0].storage_key));
    return (fileName.endsWith(".gz") ? gunzipSync(bytes) : bytes).toString("utf8");
  } finally {
    await client.end();
  }
}

/** Rows of the first `vehicles` vehicles, moved by whole days: a supplier's next, smaller file. */
export function laterFile(csv: string, vehicles: number, days: number): string {
  const [header, ...lines] = csv.trimEnd().split(/\r?\n/);
  const names = header.split(",");
  const [vehicle, time] = [names.indexOf("vehicle_id"), names.indexOf("timestamp")];
  const chosen = new Set<string>();
  const out = [header];
  for (const line of lines) {
    const cells = line.split(",");
    if (!chosen.has(cells[vehicle]) && chosen.size >= vehicles) continue;
    chosen.add(cells[vehicle]);
    cells[time] = shifted(cells[time], days);
    out.push(cells.join(","));
  }
  return `${out.join("\n")}\n`;
}

function shifted(text: string, days: number): string {
  const moveMs = days * 86_400_000;
  if (/^\d{13}$/.test(text)) return String(Number(text) + moveMs);
  if (/^\d{10}$/.test(text)) return String(Number(text) + moveMs / 1000);
  return new Date(Date.parse(text) + moveMs).toISOString();
}
