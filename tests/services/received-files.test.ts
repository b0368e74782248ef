import { Readable } from "node:stream";
import { beforeAll, describe, expect, it } from "vitest";
import { detectUpload } from "@/services/uploads/detect-upload";
import { discardUpload } from "@/services/uploads/discard-upload";
import { getUpload } from "@/services/uploads/get-upload";
import { receiveUpload } from "@/services/uploads/receive-upload";
import { startUpload } from "@/services/uploads/start-upload";
import { testContext, type TestContext } from "@tests/support/database";

const CONTENT = "vehicle_id,timestamp,lat,lon\nv1,2026-03-02T08:00:00Z,45.6,-38.3\n";
let engineer: TestContext;

beforeAll(async () => {
  engineer = await testContext("engineer");
});

async function receive(name: string, content = CONTENT) {
  return receiveUpload(engineer, { kind: "pings", name }, Readable.from([Buffer.from(content)]));
}

describe("a received file", () => {
  it("can be looked at again, also as cut in another way", async () => {
    const { uploadId, detected } = await receive("again.csv");
    expect(await detectUpload(engineer, { uploadId })).toEqual(detected);
    const recut = await detectUpload(engineer, { uploadId, delimiter: ";", header: "no" });
    expect(recut.preview).toEqual([["vehicle_id,timestamp,lat,lon"], ["v1,2026-03-02T08:00:00Z,45.6,-38.3"]]);
  });

  it("is discarded with its bytes while nothing was read in", async () => {
    const { uploadId } = await receive("wrong.csv");
    await discardUpload(engineer, { uploadId });
    await expect(getUpload(engineer, { uploadId })).rejects.toThrow(`Upload ${uploadId} does not exist.`);
    expect(await engineer.storage.size(`uploads/${uploadId}`)).toBeNull();
    await expect(discardUpload(engineer, { uploadId })).rejects.toThrow("does not exist");
  });

  it("is kept once its reading was started", async () => {
    const { uploadId, detected } = await receive("started.csv");
    await startUpload(engineer, { uploadId, mapping: detected.mapping, supplier: null });
    await expect(discardUpload(engineer, { uploadId })).rejects.toThrow("started.csv is being read or has been read in");
    expect((await getUpload(engineer, { uploadId })).state).toBe("waiting");
  });

  it("may be points of GeoJSON, which carry their own position", async () => {
    const feature = { type: "Feature", geometry: { type: "Point", coordinates: [-38.3, 45.6] }, properties: { vehicle_id: "v1", timestamp: 1772438400 } };
    const { uploadId, detected } = await receive("pings.geojson", JSON.stringify({ type: "FeatureCollection", features: [feature] }));
    expect(detected.mapping).toMatchObject({ format: "geojson", timeFormat: "epoch_s" });
    expect(await startUpload(engineer, { uploadId, mapping: detected.mapping, supplier: null })).toEqual({ uploadId });
  });
});
