import { openDatabase } from "@/db/client";
import type { Actor } from "@/domain/actor";
import { env, keepsMail, smtpUrl } from "@/env";
import { openQueue } from "@/jobs/queue";
import { keptMailFolder } from "@/mail/kept-mail";
import { openMailer } from "@/mail/mailer";
import type { Context } from "@/services/context";
import { openStorage } from "@/storage/open-storage";

type Runtime = Omit<Context, "actor" | "now">;

// On the global object, since a development server loads this module anew after each edit.
const shared = globalThis as typeof globalThis & { tailmarkRuntime?: Runtime };

function runtime(): Runtime {
  shared.tailmarkRuntime ??= openRuntime();
  return shared.tailmarkRuntime;
}

function openRuntime(): Runtime {
  const settings = env();
  const { db } = openDatabase(settings.DATABASE_URL);
  return {
    db,
    storage: openStorage(settings),
    queue: openQueue(db),
    mailer: openMailer({
      smtpUrl: smtpUrl(settings),
      from: settings.MAIL_FROM,
      keptFolder: keepsMail(settings) ? keptMailFolder(settings.DATA_DIR) : null,
    }),
    baseUrl: settings.BASE_URL,
  };
}

export function contextOf(actor: Actor): Context {
  return { ...runtime(), actor, now: new Date() };
}
