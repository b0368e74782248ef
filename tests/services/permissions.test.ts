import { readFileSync, readdirSync } from "node:fs";
import { join } from "node:path";
import { describe, expect, it } from "vitest";
import { can, PERMISSIONS, ROLES, type Permission } from "@/domain/actor";
import { AppError } from "@/domain/errors";
import type { Context } from "@/services/context";
import { testContext } from "@tests/support/database";

/** What each verb asks for, written down apart from the verbs themselves. */
const NEEDS: Record<string, Permission> = {
  addLeg: "leg.edit",
  changeRole: "user.manage",
  detectUpload: "upload.create",
  discardUpload: "upload.create",
  disablePerson: "user.manage",
  editLeg: "leg.edit",
  enablePerson: "user.manage",
  exportReport: "hotspots.view",
  exportScreen: "screen.export",
  exportStrip: "strip.export",
  getCoverage: "coverage.view",
  getJunction: "junction.view",
  getLegStrip: "strip.view",
  getLegCheck: "leg.view",
  getPingCloud: "leg.view",
  getReport: "hotspots.view",
  getTracks: "strip.view",
  getUpload: "upload.view",
  invitePerson: "user.manage",
  listAudit: "audit.view",
  listCorridors: "screen.view",
  listJunctions: "junction.view",
  listFeedTokens: "feed.manage",
  listKeptMail: "mail.view",
  listLegsToCheck: "leg.view",
  listPeople: "user.manage",
  listReports: "hotspots.view",
  listSuppliers: "upload.create",
  listUploads: "upload.view",
  makeFeedToken: "feed.manage",
  mergeLegs: "leg.edit",
  openRejects: "upload.view",
  publishReport: "hotspots.publish",
  rankJunctions: "screen.view",
  receiveUpload: "upload.create",
  requireJunction: "junction.view",
  requireLeg: "strip.view",
  resendMail: "user.manage",
  revokeFeedToken: "feed.manage",
  saveSettings: "setting.manage",
  screenTag: "screen.view",
  splitLeg: "leg.edit",
  startUpload: "upload.create",
};

/** Doors that stand open on purpose. */
const OPEN: Record<string, string> = {
  askForReset: "someone who cannot sign in asks for it; limited by address, answers alike for all",
  setPassword: "whoever holds the link from the mail",
  receiveBatch: "whoever holds a feed's token; limited by token",
  tokenPurpose: "whoever holds the link from the mail",
  getSettings: "every page shows city, units and times by them",
};

type Verb = (ctx: Context, input: unknown, more?: unknown) => Promise<unknown>;
interface Door {
  name: string;
  module: string;
}

const ROOT = join(import.meta.dirname, "../..");

/** Every function of the services that a folder's files use. */
function doorsOf(folder: string): Door[] {
  const files = readdirSync(join(ROOT, folder), { recursive: true, encoding: "utf8" }).filter((path) => /\.tsx?$/.test(path));
  const doors = new Map<string, Door>();
  for (const file of files) {
    const text = readFileSync(join(ROOT, folder, file), "utf8");
    for (const [, names, module] of text.matchAll(/^import \{([^}]+)\} from "(@\/services\/[^"]+)"/gm)) {
      for (const given of names.split(",").map((name) => name.trim())) {
        const name = given.split(/\s+as\s+/)[0];
        // Functions begin with a small letter; types, schemas and constants do not.
        if (/^[a-z]\w*$/.test(name)) doors.set(`${module}#${name}`, { name, module });
      }
    }
  }
  return [...doors.values()].sort((a, b) => (a.name < b.name ? -1 : 1));
}

const modules = import.meta.glob("../../src/services/**/*.ts");

async function verbOf({ name, module }: Door): Promise<Verb> {
  const load = modules[module.replace("@/", "../../src/") + ".ts"];
  return ((await load()) as Record<string, Verb>)[name];
}

async function* nothing(): AsyncGenerator<Uint8Array> {}

/** The refusal, or null where the verb went on to look at its (useless) input. */
async function refusalOf(verb: Verb, ctx: Context): Promise<string | null> {
  try {
    await verb(ctx, {}, nothing());
    return null;
  } catch (error) {
    const isRefusal = error instanceof AppError && (error.code === "forbidden" || error.code === "unauthenticated");
    return isRefusal ? error.code : null;
  }
}

const doors = doorsOf("src/app").filter(({ name }) => !(name in OPEN));

describe("every verb that pages, actions and routes use", () => {
  it("is in the table", () => {
    expect(doors.map((door) => door.name).filter((name) => !(name in NEEDS))).toEqual([]);
  });

  it.each(doors.filter(({ name }) => name in NEEDS))("$name lets in exactly the roles that its permission names", async (door) => {
    const verb = await verbOf(door);
    const answers: Record<string, string | null> = {};
    const expected: Record<string, string | null> = {};
    for (const role of ROLES) {
      const ctx = await testContext(role);
      answers[role] = await refusalOf(verb, ctx);
      expected[role] = can(ctx.actor, NEEDS[door.name]) ? null : "forbidden";
    }
    answers.nobody = await refusalOf(verb, await testContext("nobody"));
    expect(answers).toEqual({ ...expected, nobody: "unauthenticated" });
  });
});

describe("every verb that the worker runs", () => {
  it.each(doorsOf("src/worker/handlers"))("$name is refused to every person", async (door) => {
    const verb = await verbOf(door);
    for (const role of [...ROLES, "nobody"] as const) {
      const refusal = await refusalOf(verb, await testContext(role));
      expect(`${role}: ${refusal}`).toMatch(/: (forbidden|unauthenticated)$/);
    }
  });
});

describe("the matrix of permissions", () => {
  const rolesOf = (permission: Permission) => [...PERMISSIONS[permission]].sort();

  it("gives a reader published reports and nothing else", () => {
    const granted = (Object.keys(PERMISSIONS) as Permission[]).filter((permission) => rolesOf(permission).includes("reader"));
    expect(granted).toEqual(["hotspots.view"]);
  });

  it("lets a technician change nothing and see no screen, upload or person", () => {
    const granted = (Object.keys(PERMISSIONS) as Permission[]).filter((permission) => rolesOf(permission).includes("technician"));
    expect(granted.sort()).toEqual(["hotspots.view", "junction.view", "method.view", "strip.view"]);
  });

  it("keeps people, settings, mail and the trail with administrators", () => {
    for (const permission of ["user.manage", "setting.manage", "mail.view", "audit.view"] as const) expect(rolesOf(permission)).toEqual(["admin"]);
  });
});
