import { eq, sql } from "drizzle-orm";
import { beforeEach, describe, expect, it } from "vitest";
import { auditEvents, users } from "@/db/schema";
import { listAudit } from "@/services/audit/list-audit";
import { hashPassword } from "@/services/auth/passwords";
import { changeRole } from "@/services/users/change-role";
import { invitePerson } from "@/services/users/invite-person";
import { listPeople } from "@/services/users/list-people";
import { resendMail } from "@/services/users/resend-mail";
import { disablePerson, enablePerson } from "@/services/users/set-access";
import { testContext, TEST_NOW, type TestContext } from "@tests/support/database";

let admin: TestContext;

beforeEach(async () => {
  admin = await testContext("admin");
  await admin.db.execute(sql`delete from pgboss.job`);
  await admin.db.delete(auditEvents);
});

const queued = async () =>
  (await admin.db.execute<{ data: { userId: string; purpose: string } }>(sql`select data from pgboss.job where name = 'send-password-mail' order by created_on, id`)).rows.map((row) => row.data);

const trail = async () => (await listAudit(admin)).map(({ action, subject }) => [action, subject]);

async function addPerson(email: string, password: string | null = "a long enough password"): Promise<string> {
  const passwordHash = password === null ? null : await hashPassword(password);
  const [row] = await admin.db.insert(users).values({ email, name: "Nell", role: "reader", passwordHash, sessionsValidFrom: TEST_NOW }).returning({ id: users.id });
  return row.id;
}

describe("inviting", () => {
  it("makes the account, queues the mail and notes both in the trail", async () => {
    const { userId } = await invitePerson(admin, { email: " New.Person@Test.example", name: "New Person", role: "engineer" });
    const person = (await listPeople(admin)).find((entry) => entry.userId === userId);
    expect(person).toEqual({ userId, email: "new.person@test.example", name: "New Person", role: "engineer", state: "invited", isSelf: false });
    expect(await queued()).toEqual([{ userId, purpose: "invitation" }]);
    expect(await trail()).toEqual([["invited", "new.person@test.example"]]);
  });

  it("refuses an address that has an account, in whatever case, and sends nothing", async () => {
    await addPerson("taken@test.example");
    await expect(invitePerson(admin, { email: "Taken@test.example", name: "Again", role: "reader" })).rejects.toMatchObject({
      code: "conflict",
      fieldErrors: { email: ["taken@test.example has an account already."] },
    });
    expect(await queued()).toEqual([]);
    expect(await trail()).toEqual([]);
  });

  it("makes one account of two invitations that come at once", async () => {
    const twice = { email: "twice@test.example", name: "Twice", role: "reader" } as const;
    const results = await Promise.allSettled([invitePerson(admin, twice), invitePerson(admin, twice)]);
    expect(results.map((result) => result.status).sort()).toEqual(["fulfilled", "rejected"]);
    expect(await queued()).toHaveLength(1);
  });

  it("says which field is wrong", async () => {
    await expect(invitePerson(admin, { email: "no address", name: "", role: "reader" })).rejects.toThrow("Give a full e-mail address.");
  });
});

describe("an account", () => {
  it("changes its role, and the trail says from what to what", async () => {
    const userId = await addPerson("role@test.example");
    await changeRole(admin, { userId, role: "technician" });
    expect(await admin.db.select({ role: users.role }).from(users).where(eq(users.id, userId))).toEqual([{ role: "technician" }]);
    expect((await listAudit(admin))[0]).toMatchObject({ action: "changed role", detail: { from: "reader", to: "technician" } });
    await changeRole(admin, { userId, role: "technician" });
    expect(await trail()).toHaveLength(1);
  });

  it("is disabled and enabled again", async () => {
    const userId = await addPerson("off@test.example");
    await disablePerson(admin, { userId });
    await disablePerson(admin, { userId });
    expect((await listPeople(admin)).find((person) => person.userId === userId)?.state).toBe("disabled");
    await expect(resendMail(admin, { userId })).rejects.toThrow("off@test.example is disabled. Enable the account first.");
    await enablePerson(admin, { userId });
    expect((await listPeople(admin)).find((person) => person.userId === userId)?.state).toBe("active");
    expect(await trail()).toEqual([
      ["enabled", "off@test.example"],
      ["disabled", "off@test.example"],
    ]);
  });

  it("is sent what it needs: the invitation again, or a link for a new password", async () => {
    const invited = await addPerson("invited@test.example", null);
    const active = await addPerson("active@test.example");
    await resendMail(admin, { userId: invited });
    await resendMail(admin, { userId: active });
    expect(await queued()).toEqual([
      { userId: invited, purpose: "invitation" },
      { userId: active, purpose: "reset" },
    ]);
  });

  it("cannot take role or access from itself", async () => {
    if (admin.actor.type !== "user") throw new Error("The administrator is a person.");
    const { userId } = admin.actor;
    await expect(changeRole(admin, { userId, role: "reader" })).rejects.toThrow("You cannot change your own role");
    await expect(disablePerson(admin, { userId })).rejects.toThrow("You cannot change your own role");
  });

  it("that does not exist is named in the refusal", async () => {
    const userId = "6f1c2a54-0b0e-4c39-9d56-0d3d7a1f2b3c";
    for (const verb of [disablePerson, enablePerson, resendMail]) await expect(verb(admin, { userId })).rejects.toThrow(`Person ${userId} does not exist.`);
  });
});

describe("the audit trail", () => {
  it("is read page by page, newest first", async () => {
    const rows = Array.from({ length: 60 }, (_, i) => ({ at: TEST_NOW, actor: "x", action: `act ${i}`, subject: "s", detail: {} }));
    await admin.db.insert(auditEvents).values(rows);
    const first = await listAudit(admin);
    expect([first.length, first[0].action, first[49].action]).toEqual([50, "act 59", "act 10"]);
    const second = await listAudit(admin, { before: String(first[49].id) });
    expect(second.map((event) => event.action)).toEqual(["act 9", "act 8", "act 7", "act 6", "act 5", "act 4", "act 3", "act 2", "act 1", "act 0"]);
    expect(await listAudit(admin, { before: "nonsense" })).toHaveLength(50);
  });
});
