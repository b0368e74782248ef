import { mkdir, readFile, readdir, rename, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { z } from "zod";

/** A mail that the local stand-in for a mail server took and kept. */
export const KeptMail = z.object({
  id: z.string(),
  receivedAt: z.iso.datetime(),
  from: z.string(),
  to: z.string(),
  subject: z.string(),
  text: z.string(),
});
export type KeptMail = z.infer<typeof KeptMail>;

export function keptMailFolder(dataDir: string): string {
  return join(dataDir, "kept-mail");
}

export async function keepMail(folder: string, mail: KeptMail): Promise<void> {
  await mkdir(folder, { recursive: true });
  const path = join(folder, `${mail.id}.json`);
  await writeFile(`${path}.part`, JSON.stringify(mail, null, 2));
  await rename(`${path}.part`, path);
}

/** Newest first. */
export async function listKeptMail(folder: string, limit: number): Promise<KeptMail[]> {
  const names = (await namesIn(folder)).filter((name) => name.endsWith(".json")).sort().reverse();
  return Promise.all(names.slice(0, limit).map(async (name) => KeptMail.parse(JSON.parse(await readFile(join(folder, name), "utf8")))));
}

async function namesIn(folder: string): Promise<string[]> {
  try {
    return await readdir(folder);
  } catch (error) {
    if (error instanceof Error && "code" in error && error.code === "ENOENT") return [];
    throw error;
  }
}
