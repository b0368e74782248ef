import { eq } from "drizzle-orm";
import { beforeEach, describe, expect, it } from "vitest";
import { auditEvents, passwordTokens, signInAttempts, users } from "@/db/schema";
import { actorOfSession } from "@/services/auth/actor-of-session";
import { ACCOUNT_LIMIT, ADDRESS_LIMIT, PAIR_LIMIT, WINDOW_MINUTES } from "@/services/auth/attempts";
import { answerResetRequest } from "@/services/auth/answer-reset-request";
import { askForReset } from "@/services/auth/ask-for-reset";
import { hashPassword } from "@/services/auth/passwords";
import { sendPasswordMail } from "@/services/auth/send-password-mail";
import { setPassword, tokenPurpose } from "@/services/auth/set-password";
import { signIn } from "@/services/auth/sign-in";
import { TEST_NOW, testContext, type TestContext } from "@tests/support/database";

const EMAIL = "nell@test.example";
const PASSWORD = "a long enough password";

let ctx: TestContext;
let userId: string;

beforeEach(async () => {
  ctx = await testContext("nobody");
  await ctx.db.delete(users);
  await ctx.db.delete(signInAttempts);
  const [row] = await ctx.db
    .insert(users)
    .values({ email: EMAIL, name: "Nell", role: "engineer", passwordHash: await hashPassword(PASSWORD), sessionsValidFrom: TEST_NOW })
    .returning({ id: users.id });
  userId = row.id;
});

const attempt = (password: string, address = "10.1.1.1", email = EMAIL, now = TEST_NOW) => signIn({ ...ctx, now }, { email, password, address });
const minutesLater = (minutes: number) => new Date(TEST_NOW.getTime() + minutes * 60_000);

describe("signing in", () => {
  it("takes the right password, whatever the case of the address, and notes it in the audit trail", async () => {
    expect(await attempt(PASSWORD, "10.1.1.1", " NELL@test.example ")).toEqual({ userId, name: "Nell", email: EMAIL });
    const trail = await ctx.db.select().from(auditEvents).where(eq(auditEvents.userId, userId));
    expect(trail.map(({ action, subject }) => [action, subject])).toEqual([["signed in", EMAIL]]);
  });

  it("answers a wrong password, an unknown account, a disabled one and one without password all the same", async () => {
    expect(await attempt("wrong")).toBeNull();
    expect(await attempt(PASSWORD, "10.1.1.1", "nobody@test.example")).toBeNull();
    await ctx.db.update(users).set({ disabledAt: TEST_NOW }).where(eq(users.id, userId));
    expect(await attempt(PASSWORD)).toBeNull();
    await ctx.db.update(users).set({ disabledAt: null, passwordHash: null }).where(eq(users.id, userId));
    expect(await attempt(PASSWORD)).toBeNull();
  });

  it("refuses even the right password after too many failures from one address, until the window is over; the owner elsewhere comes in", async () => {
    for (let i = 0; i < 2 * PAIR_LIMIT; i++) expect(await attempt("wrong", "10.0.0.1")).toBeNull();
    expect(await attempt(PASSWORD, "10.0.0.1")).toBeNull();
    expect(await attempt(PASSWORD, "10.0.0.99")).not.toBeNull();
    expect(await attempt(PASSWORD, "10.0.0.1", EMAIL, minutesLater(WINDOW_MINUTES))).not.toBeNull();
  });

  it("refuses an account that is tried from many addresses", async () => {
    for (let i = 0; i < ACCOUNT_LIMIT; i++) expect(await attempt("wrong", `10.0.0.${i}`)).toBeNull();
    expect(await attempt(PASSWORD, "10.0.0.99")).toBeNull();
    expect(await attempt(PASSWORD, "10.0.0.99", EMAIL, minutesLater(WINDOW_MINUTES))).not.toBeNull();
  });

  it("lets attempts that are sent side by side through no more often than those sent one by one", async () => {
    const guesses = Array.from({ length: 12 }, (_, i) => (i < PAIR_LIMIT ? "wrong" : PASSWORD));
    for (const guess of guesses.slice(0, PAIR_LIMIT)) await attempt(guess);
    const rest = await Promise.all(guesses.slice(PAIR_LIMIT).map((guess) => attempt(guess)));
    expect(rest).toEqual(rest.map(() => null));
  });

  it("refuses an address that tries many accounts", async () => {
    for (let i = 0; i < ADDRESS_LIMIT; i++) await attempt("wrong", "10.9.9.9", `guess${i}@test.example`);
    expect(await attempt(PASSWORD, "10.9.9.9")).toBeNull();
    expect(await attempt(PASSWORD, "10.1.1.1")).not.toBeNull();
  });

  it("forgets the account's failures after a success", async () => {
    for (let i = 0; i < PAIR_LIMIT - 1; i++) await attempt("wrong");
    expect(await attempt(PASSWORD)).not.toBeNull();
    for (let i = 0; i < PAIR_LIMIT - 1; i++) await attempt("wrong");
    expect(await attempt(PASSWORD)).not.toBeNull();
  });
});

describe("a session", () => {
  it("follows the account: role at once, nothing once it is disabled", async () => {
    const session = { userId, issuedAt: TEST_NOW };
    expect(await actorOfSession(ctx.db, session)).toMatchObject({ type: "user", role: "engineer" });
    await ctx.db.update(users).set({ role: "reader" }).where(eq(users.id, userId));
    expect(await actorOfSession(ctx.db, session)).toMatchObject({ role: "reader" });
    await ctx.db.update(users).set({ disabledAt: TEST_NOW }).where(eq(users.id, userId));
    expect(await actorOfSession(ctx.db, session)).toEqual({ type: "nobody" });
  });

  it("ends when the password is set anew", async () => {
    const token = await mailedToken("reset");
    await setPassword({ ...ctx, now: minutesLater(5) }, { token, password: "another password", repeated: "another password" });
    expect(await actorOfSession(ctx.db, { userId, issuedAt: TEST_NOW })).toEqual({ type: "nobody" });
    expect(await actorOfSession(ctx.db, { userId, issuedAt: minutesLater(5) })).toMatchObject({ type: "user" });
  });
});

async function mailedToken(purpose: "invitation" | "reset"): Promise<string> {
  const worker = await testContext("job");
  await sendPasswordMail(worker, { userId, purpose });
  const [mail] = worker.sent;
  expect(mail.to).toBe(EMAIL);
  const token = /http:\/\/city\.example\/set-password\?token=(\S+)/.exec(mail.text)?.[1];
  if (!token) throw new Error(`No link in the mail:\n${mail.text}`);
  return token;
}

describe("a password link", () => {
  const newPassword = { password: "another password", repeated: "another password" };

  it("works once, and only its hash is kept", async () => {
    const token = await mailedToken("reset");
    const [row] = await ctx.db.select().from(passwordTokens);
    expect(row.tokenHash).not.toContain(token);
    expect(await tokenPurpose(ctx, token)).toBe("reset");
    await setPassword(ctx, { token, ...newPassword });
    expect(await attempt("another password")).not.toBeNull();
    expect(await tokenPurpose(ctx, token)).toBeNull();
    await expect(setPassword(ctx, { token, ...newPassword })).rejects.toThrow("has been used or has run out");
  });

  it("is claimed by one of two requests that come at once", async () => {
    const token = await mailedToken("reset");
    const results = await Promise.allSettled([setPassword(ctx, { token, ...newPassword }), setPassword(ctx, { token, ...newPassword })]);
    expect(results.map((result) => result.status).sort()).toEqual(["fulfilled", "rejected"]);
  });

  it("runs out: a reset after an hour, an invitation after a week", async () => {
    const reset = await mailedToken("reset");
    expect(await tokenPurpose({ ...ctx, now: minutesLater(59) }, reset)).toBe("reset");
    expect(await tokenPurpose({ ...ctx, now: minutesLater(60) }, reset)).toBeNull();
    const invitation = await mailedToken("invitation");
    expect(await tokenPurpose({ ...ctx, now: minutesLater(7 * 24 * 60 - 1) }, invitation)).toBe("invitation");
    expect(await tokenPurpose({ ...ctx, now: minutesLater(7 * 24 * 60) }, invitation)).toBeNull();
  });

  it("makes earlier links void", async () => {
    const first = await mailedToken("reset");
    await mailedToken("reset");
    expect(await tokenPurpose(ctx, first)).toBeNull();
  });

  it("takes no short password and no two that differ", async () => {
    const token = await mailedToken("reset");
    await expect(setPassword(ctx, { token, password: "short", repeated: "short" })).rejects.toThrow("at least 10");
    await expect(setPassword(ctx, { token, password: "long enough one", repeated: "long enough two" })).rejects.toThrow("differ");
  });
});

describe("asking for a new password", () => {
  const ask = (email: string, address = "10.1.1.1") => askForReset(ctx, { email, address });

  it("does the same for known and unknown accounts; only the worker tells them apart", async () => {
    const queued: unknown[] = [];
    const queue: typeof ctx.queue = { ...ctx.queue, enqueue: async (job, payload) => queued.push([job.name, payload]) > 0 };
    for (const email of [EMAIL, "unknown@test.example"]) expect(await askForReset({ ...ctx, queue }, { email, address: "10.1.1.1" })).toBeUndefined();
    expect(queued).toEqual([EMAIL, "unknown@test.example"].map((email) => ["answer-reset-request", { email }]));

    const worker = await testContext("job");
    await answerResetRequest(worker, { email: "unknown@test.example" });
    expect(worker.sent).toEqual([]);
    await answerResetRequest(worker, { email: EMAIL });
    expect(worker.sent.map(({ to, subject }) => [to, subject])).toEqual([[EMAIL, "Set a new password for Tailmark in My city"]]);
    await ctx.db.update(users).set({ disabledAt: TEST_NOW }).where(eq(users.id, userId));
    await answerResetRequest(worker, { email: EMAIL });
    expect(worker.sent).toHaveLength(1);
    await expect(answerResetRequest(ctx, { email: EMAIL })).rejects.toThrow("by the worker only");
  });

  it("is limited by address", async () => {
    for (let i = 0; i < ADDRESS_LIMIT; i++) await ask("unknown@test.example", "10.7.7.7");
    await expect(ask(EMAIL, "10.7.7.7")).rejects.toThrow("Too many requests");
  });
});
