import { resolve } from "node:path";
import { z } from "zod";

/** How the installation runs: `demo` shows the invented city with known accounts, `production` accepts no defaults. */
const MODES = ["production", "demo", "development", "test"] as const;

/** Known to everyone who reads this file, hence refused in production. */
const DEFAULT_SECRET = "tailmark-development-secret-known-to-all";

/** Pieces of this size keep a worker well below a gigabyte. */
const USUAL_PIECE_ROWS = 500_000;

const positive = (fallback: number, max: number) => z.coerce.number().int().min(1).max(max).default(fallback);

const Env = z.object({
  /** Unset: `production` for a production build, else `development`. */
  TAILMARK_MODE: z.enum(MODES),
  /** PostgreSQL 15 or later. */
  DATABASE_URL: z.url({ protocol: /^postgres(ql)?$/ }),
  /** Signs the session cookies; 32 characters or more. */
  NEXTAUTH_SECRET: z.string().min(32),
  /** Address under which people reach the application; links in mail start with it. */
  BASE_URL: z.url({ protocol: /^https?$/ }).transform((url) => url.replace(/\/+$/, "")),
  /** Proxies in front that add to X-Forwarded-For; what clients write there themselves is not believed. 0: people connect directly. */
  TRUSTED_PROXIES: z.coerce.number().int().min(0).max(9).default(0),
  /** Folder of uploads, where no bucket is named, and, in demo and tests, of kept mail. */
  DATA_DIR: z.string().default(".data").transform((path) => resolve(path)),
  /** Bucket of an S3-compatible store that keeps the uploads instead of the folder; web and workers may then run on several machines. */
  S3_BUCKET: z.string().regex(/^[a-z0-9][a-z0-9.-]{1,61}[a-z0-9]$/, "is not the name of a bucket").optional(),
  /** Address of that store; unset for Amazon's own. */
  S3_ENDPOINT: z.url({ protocol: /^https?$/ }).optional(),
  S3_REGION: z.string().min(1).default("us-east-1"),
  /** Keys of the store; unset where the machine's own role opens it. */
  S3_ACCESS_KEY_ID: z.string().optional(),
  S3_SECRET_ACCESS_KEY: z.string().optional(),
  /** Mail server. Unset outside production: mail is kept in a folder by a local stand-in. */
  SMTP_URL: z.url({ protocol: /^smtps?$/ }).optional(),
  /** Port on loopback of that stand-in. */
  KEPT_MAIL_PORT: positive(2525, 65_535),
  MAIL_FROM: z.string().default("Tailmark <tailmark@localhost>"),
  /** Size of the invented city that an empty database is filled with: `small` is for tests. */
  DEMO_CITY: z.enum(["demo", "small"]).default("demo"),
  /** Hours until a session ends and the person signs in again. */
  SESSION_HOURS: positive(12, 24 * 30),
  /** Jobs that one worker process runs at the same time. */
  WORKER_CONCURRENCY: positive(1, 16),
  /** Rows of pings in a piece of work that workers share; files of fewer are read by one worker. Memory of a worker grows with it. */
  INGEST_PIECE_ROWS: positive(USUAL_PIECE_ROWS, 5_000_000),
  /** First administrator of an empty production database; receives an invitation. */
  ADMIN_EMAIL: z.email().optional(),
});

export type Env = z.infer<typeof Env>;

type RawEnv = Record<string, string | undefined>;

/** Throws one sentence that names every offending variable. */
export function readEnv(raw: RawEnv): Env {
  const given = Object.fromEntries(Object.entries(raw).filter(([, value]) => value !== ""));
  const mode = given.TAILMARK_MODE ?? (given.NODE_ENV === "production" ? "production" : "development");
  const parsed = Env.safeParse({ ...(mode === "production" ? {} : developmentDefaults()), ...given, TAILMARK_MODE: mode });
  if (!parsed.success) {
    const faults = parsed.error.issues.map((issue) => `${issue.path.join(".")}: ${issue.message}`);
    throw new Error(`The environment is not usable. ${faults.join("; ")}`);
  }
  refuseDefaults(parsed.data);
  refuseHalfBucket(parsed.data);
  return parsed.data;
}

function developmentDefaults(): RawEnv {
  return {
    DATABASE_URL: "postgres://tailmark@127.0.0.1:5432/tailmark",
    NEXTAUTH_SECRET: DEFAULT_SECRET,
    BASE_URL: "http://127.0.0.1:3000",
  };
}

function refuseDefaults(env: Env): void {
  if (env.TAILMARK_MODE !== "production") return;
  if (env.NEXTAUTH_SECRET === DEFAULT_SECRET) {
    throw new Error("NEXTAUTH_SECRET is the development default; production needs a secret of its own.");
  }
  if (!env.SMTP_URL) throw new Error("SMTP_URL is missing; production needs a mail server.");
}

function refuseHalfBucket(env: Env): void {
  if (env.S3_BUCKET === undefined && (env.S3_ENDPOINT ?? env.S3_ACCESS_KEY_ID ?? env.S3_SECRET_ACCESS_KEY) !== undefined) {
    throw new Error("S3_BUCKET is missing; the other S3 settings have no effect without it.");
  }
  if ((env.S3_ACCESS_KEY_ID === undefined) !== (env.S3_SECRET_ACCESS_KEY === undefined)) {
    throw new Error("S3_ACCESS_KEY_ID and S3_SECRET_ACCESS_KEY go together: give both or neither.");
  }
}

let current: Env | undefined;

/** Parsed once, on first use, so that a build needs no database. */
export function env(): Env {
  if (!current) {
    current = readEnv(process.env);
    // The sign-in library reads its own variable; it must name the same address.
    process.env.NEXTAUTH_URL ??= current.BASE_URL;
  }
  return current;
}

/** Address of the mail server or of its local stand-in. */
export function smtpUrl(settings: Env): string {
  return settings.SMTP_URL ?? `smtp://127.0.0.1:${settings.KEPT_MAIL_PORT}`;
}

/** Mail is kept for an administrator to read where no mail server is named. */
export function keepsMail(settings: Env): boolean {
  return settings.SMTP_URL === undefined;
}
