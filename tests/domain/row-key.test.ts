import { describe, expect, it } from "vitest";
import { RowKey } from "@/domain/row-key";

describe("key of a row", () => {
  it.each([["7", 7], [7, 7], ["2147483647", 2147483647]])("takes %j", (given, key) => {
    expect(RowKey.parse(given)).toBe(key);
  });

  it.each(["2147483648", "99999999999", "0", "-1", "1.5", "first"])("does not take %j", (given) => {
    expect(RowKey.safeParse(given).success).toBe(false);
  });
});
