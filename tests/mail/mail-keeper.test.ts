import { mkdtemp, readdir, rm } from "node:fs/promises";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { startMailKeeper, type MailKeeper } from "@/mail/mail-keeper";
import { openMailer, type Mailer } from "@/mail/mailer";

let folder: string;
let keeper: MailKeeper;
let mailer: Mailer;

beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), "tailmark-mail-"));
  keeper = await startMailKeeper(folder, 0);
  mailer = openMailer({ smtpUrl: `smtp://127.0.0.1:${keeper.port}`, from: "Tailmark <tailmark@city.example>", keptFolder: folder });
});

afterEach(async () => {
  mailer.close();
  await keeper.close();
  await rm(folder, { recursive: true, force: true });
});

describe("the stand-in for a mail server", () => {
  it("keeps what was sent, accents, long lines and all", async () => {
    const link = `http://city.example/set-password?token=${"x".repeat(120)}`;
    await mailer.send({ to: "nell@test.example", subject: "Conta em São Brás, para já", text: `Olá Nell,\n\n${link}\n.\nlast line` });
    const [mail] = (await mailer.listKept(10)) ?? [];
    expect(mail).toMatchObject({
      from: '"Tailmark" <tailmark@city.example>',
      to: "nell@test.example",
      subject: "Conta em São Brás, para já",
      text: `Olá Nell,\n\n${link}\n.\nlast line`,
    });
  });

  it("lists the newest first and no more than asked for", async () => {
    for (const subject of ["first", "second", "third"]) {
      await mailer.send({ to: "nell@test.example", subject, text: "." });
      await new Promise((resolve) => setTimeout(resolve, 2));
    }
    expect((await mailer.listKept(2))?.map((mail) => mail.subject)).toEqual(["third", "second"]);
    expect((await readdir(folder)).every((name) => name.endsWith(".json"))).toBe(true);
  });

  it("cannot be made to send to someone else by a line break in an address or a subject", async () => {
    await mailer.send({ to: "nell@test.example", subject: "Hello\r\nBcc: other@test.example", text: "." });
    const mails = (await mailer.listKept(10)) ?? [];
    expect(mails.map((mail) => mail.to)).toEqual(["nell@test.example"]);
  });
});

describe("a mailer", () => {
  it("fails where nobody takes the mail, so that its job is tried again", async () => {
    await keeper.close();
    await expect(mailer.send({ to: "nell@test.example", subject: "s", text: "t" })).rejects.toThrow("ECONNREFUSED");
    keeper = await startMailKeeper(folder, 0);
  });

  it("keeps nothing where mail really goes out", async () => {
    const real = openMailer({ smtpUrl: `smtp://127.0.0.1:${keeper.port}`, from: "a@b.example", keptFolder: null });
    expect(await real.listKept(10)).toBeNull();
    real.close();
  });
});
