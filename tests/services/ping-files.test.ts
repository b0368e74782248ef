import { expect, it } from "vitest";
import { uploads } from "@/db/schema";
import { WRITTEN_PINGS } from "@/formats/pings/write-pings";
import { pingFiles } from "@/services/ingest/ping-files";
import { testContext } from "@tests/support/database";

it("lists files of one and the same instant in the order in which they came", async () => {
  const { db, now } = await testContext("job");
  // Ids are random: with ten files a list by id has a chance of 1 in 3.6 million to be in order.
  const keys = Array.from({ length: 10 }, (_, i) => `uploads/${i}`);
  for (const storageKey of keys) {
    await db.insert(uploads).values({ kind: "pings", fileName: "a.csv", storageKey, bytes: 1, sha256: storageKey, mapping: WRITTEN_PINGS, state: "done", createdAt: now });
  }
  await db.insert(uploads).values({ kind: "pings", fileName: "b.csv", storageKey: "uploads/earlier", bytes: 1, sha256: "b", mapping: WRITTEN_PINGS, state: "done", createdAt: new Date(now.getTime() - 1) });
  expect((await pingFiles(db)).map((file) => file.storageKey)).toEqual(["uploads/earlier", ...keys]);
});
