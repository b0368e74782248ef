import type { Db } from "@/db/client";
import { can, type Actor, type Permission } from "@/domain/actor";
import { AppError } from "@/domain/errors";
import type { Queue } from "@/jobs/queue";
import type { Mailer } from "@/mail/mailer";
import type { Storage } from "@/storage/storage";

/** All that a verb may touch. Built once per request by the server, once per job by the worker, by hand in tests. */
export interface Context {
  actor: Actor;
  db: Db;
  now: Date;
  storage: Storage;
  queue: Queue;
  mailer: Mailer;
  /** Address of the web application as people reach it, without a trailing slash. */
  baseUrl: string;
  /** Rows of pings in a piece of work that workers share; the usual number where absent. */
  pieceRows?: number;
}

export function requirePermission(ctx: Context, permission: Permission): void {
  if (can(ctx.actor, permission)) return;
  if (ctx.actor.type === "nobody") throw new AppError("unauthenticated", "Sign in first.");
  throw new AppError("forbidden", "Your role does not allow this. Ask an administrator if you need it.");
}
