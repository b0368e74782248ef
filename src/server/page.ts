import { headers } from "next/headers";
import { forbidden, notFound, redirect } from "next/navigation";
import { can, type Actor, type Permission } from "@/domain/actor";
import { AppError } from "@/domain/errors";
import type { Context } from "@/services/context";
import { currentContext } from "./current-context";

export type PersonContext = Context & { actor: Extract<Actor, { type: "user" }> };

/**
 * Context of a page that needs a permission. Signed out: goes to the sign-in page and comes back after it.
 * Without the permission: the nearest `forbidden.tsx` is shown with status 403.
 */
export async function pageContext(permission: Permission): Promise<PersonContext> {
  const ctx = await signedInContext();
  if (!can(ctx.actor, permission)) forbidden();
  return ctx;
}

/** Context of a page or layout for everyone who is signed in. */
export async function signedInContext(): Promise<PersonContext> {
  const ctx = await currentContext();
  const { actor } = ctx;
  return actor.type === "user" ? { ...ctx, actor } : goToSignIn();
}

/** Awaits a verb for a page: what it refuses or cannot find becomes the page's own state. */
export async function forPage<T>(pending: Promise<T>): Promise<T> {
  try {
    return await pending;
  } catch (error) {
    if (!(error instanceof AppError)) throw error;
    if (error.code === "not_found") notFound();
    if (error.code === "forbidden") forbidden();
    if (error.code === "unauthenticated") await goToSignIn();
    throw error;
  }
}

async function goToSignIn(): Promise<never> {
  const here = (await headers()).get("x-tailmark-path");
  redirect(here && here !== "/" ? `/sign-in?next=${encodeURIComponent(here)}` : "/sign-in");
}
