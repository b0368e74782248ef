import { customType, timestamp } from "drizzle-orm/pg-core";

/** Bytes that a core encoder wrote. */
export const bytea = customType<{ data: Uint8Array; driverData: Buffer }>({
  dataType: () => "bytea",
  toDriver: (value) => Buffer.from(value.buffer, value.byteOffset, value.byteLength),
  fromDriver: (value) => new Uint8Array(value.buffer, value.byteOffset, value.byteLength),
});

export const instant = (name: string) => timestamp(name, { withTimezone: true, mode: "date" });
