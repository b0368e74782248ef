import { mkdir, writeFile } from "node:fs/promises";
import path from "node:path";
import { buildCity } from "../network/build-city";
import { buildBaseMap, featureCollection } from "./base-map";

/** Writes the map's static files: `npx tsx seed/basemap/write-base-map.ts [folder]`. */
const folder = process.argv[2] ?? path.join("public", "map");
await mkdir(folder, { recursive: true });
const map = buildBaseMap(buildCity("demo"));
for (const [name, features] of Object.entries(map)) {
  await writeFile(path.join(folder, `${name}.geojson`), featureCollection(features));
}
