import { describe, expect, it } from "vitest";
import type { Role } from "@/domain/actor";
import { isCurrentPlace, placesFor } from "@/ui/shell/navigation";

const labels = (role: Role) => placesFor({ type: "user", userId: "1", name: "A", email: "a@example.org", role }).map((place) => place.label);

describe("places of the header", () => {
  it("shows each role what it may open", () => {
    expect(labels("engineer")).toEqual(["Screen", "Junctions", "Data", "Hotspots", "Methods"]);
    expect(labels("technician")).toEqual(["Junctions", "Hotspots", "Methods"]);
    expect(labels("reader")).toEqual(["Hotspots"]);
    expect(labels("admin")).toContain("Admin");
    expect(placesFor({ type: "nobody" })).toEqual([]);
  });

  it("counts a leg strip to the junctions and any admin page to Admin", () => {
    expect(isCurrentPlace({ href: "/junctions" }, "/legs/12")).toBe(true);
    expect(isCurrentPlace({ href: "/admin/people" }, "/admin/audit")).toBe(true);
    expect(isCurrentPlace({ href: "/screen" }, "/data/12")).toBe(false);
  });
});
