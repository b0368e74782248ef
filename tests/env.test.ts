import { describe, expect, it } from "vitest";
import { keepsMail, readEnv, smtpUrl } from "@/env";

const PRODUCTION = {
  NODE_ENV: "production",
  DATABASE_URL: "postgres://u:p@db.example:5432/tailmark",
  NEXTAUTH_SECRET: "0123456789abcdef0123456789abcdef",
  BASE_URL: "https://tailmark.city.example/",
  SMTP_URL: "smtps://mail.city.example",
};

describe("the environment", () => {
  it("needs nothing in development", () => {
    const env = readEnv({});
    expect(env).toMatchObject({ TAILMARK_MODE: "development", BASE_URL: "http://127.0.0.1:3000", SESSION_HOURS: 12 });
    expect(keepsMail(env)).toBe(true);
    expect(smtpUrl(env)).toBe("smtp://127.0.0.1:2525");
  });

  it("is taken as given in production", () => {
    const env = readEnv(PRODUCTION);
    expect(env).toMatchObject({ TAILMARK_MODE: "production", BASE_URL: "https://tailmark.city.example" });
    expect(keepsMail(env)).toBe(false);
    expect(smtpUrl(env)).toBe("smtps://mail.city.example");
  });

  it.each(["DATABASE_URL", "NEXTAUTH_SECRET", "BASE_URL", "SMTP_URL"])("has no default for %s in production", (name) => {
    expect(() => readEnv({ ...PRODUCTION, [name]: undefined })).toThrow(name);
    expect(() => readEnv({ ...PRODUCTION, [name]: "" })).toThrow(name);
  });

  it("refuses the development secret, and a short one, in production", () => {
    const { NEXTAUTH_SECRET } = readEnv({});
    expect(() => readEnv({ ...PRODUCTION, NEXTAUTH_SECRET })).toThrow("production needs a secret of its own");
    expect(() => readEnv({ ...PRODUCTION, NEXTAUTH_SECRET: "short" })).toThrow("NEXTAUTH_SECRET");
  });

  it("takes a bucket only with its name and with both keys or none", () => {
    const bucket = { S3_BUCKET: "city-files", S3_ENDPOINT: "https://store.example" };
    expect(readEnv(bucket)).toMatchObject({ ...bucket, S3_REGION: "us-east-1" });
    expect(() => readEnv({ S3_ENDPOINT: "https://store.example" })).toThrow("S3_BUCKET is missing");
    expect(() => readEnv({ ...bucket, S3_ACCESS_KEY_ID: "k" })).toThrow("give both or neither");
    expect(() => readEnv({ S3_BUCKET: "Not a bucket" })).toThrow("S3_BUCKET: is not the name of a bucket");
  });

  it("names every value that is wrong, in one sentence", () => {
    expect(() => readEnv({ DATABASE_URL: "mysql://x", SESSION_HOURS: "0" })).toThrow(/DATABASE_URL: .*; SESSION_HOURS: /);
  });
});
