"use client";

import type { ReactNode } from "react";
import { Button } from "./button";

function State(props: { title: string; children?: ReactNode; role?: "status" | "alert"; mark: ReactNode }) {
  return (
    <div role={props.role} className="mx-auto flex max-w-xl flex-col gap-3 px-6 py-14">
      {props.mark}
      <p className="font-table text-xl font-semibold leading-tight">{props.title}</p>
      {props.children ? <div className="flex flex-col items-start gap-4 text-ink-soft">{props.children}</div> : null}
    </div>
  );
}

/** A stop line with nothing, something or too much behind it: the three drawings of the states. */
function Drawing({ kind }: { kind: "empty" | "failed" | "closed" }) {
  return (
    <svg aria-hidden="true" width="96" height="36" viewBox="0 0 96 36" fill="none" stroke="#16213A" strokeWidth="1.5">
      <path d="M0 6H72M0 30H72" stroke="#B9B09C" />
      <path d="M72 2V34" strokeWidth="3" />
      {kind === "empty" ? <path d="M4 18H64" stroke="#B9B09C" strokeDasharray="8 7" /> : null}
      {kind === "failed" ? <path d="M4 18H34M40 10l8 16M48 10l-8 16" stroke="#C43E1C" /> : null}
      {kind === "closed" ? <path d="M4 18H52M58 12v12M64 12v12" stroke="#C43E1C" /> : null}
    </svg>
  );
}

/** Nothing to show. `children` says what to change. */
export function Empty({ title, children }: { title: string; children?: ReactNode }) {
  return (
    <State title={title} role="status" mark={<Drawing kind="empty" />}>
      {children}
    </State>
  );
}

/** Work in progress; `title` says on what. */
export function Loading({ title = "Reading the figures" }: { title?: string }) {
  return (
    <div role="status" className="mx-auto flex max-w-xl flex-col gap-3 px-6 py-14">
      <svg aria-hidden="true" width="96" height="36" viewBox="0 0 96 36" fill="none">
        <path d="M0 6H72M0 30H72" stroke="#B9B09C" strokeWidth="1.5" />
        <path d="M72 2V34" stroke="#16213A" strokeWidth="3" />
        {[52, 38, 24].map((x, at) => (
          <rect key={x} x={x} y="14" width="10" height="8" fill="#16213A" className="animate-pulse" style={{ animationDelay: `${at * 250}ms` }} />
        ))}
      </svg>
      <p className="font-table text-xl font-semibold">{title}…</p>
    </div>
  );
}

/** Something failed. The message is the server's own sentence; retrying is offered where it can help. */
export function Failed(props: { title?: string; message: string; onRetry?: () => void; children?: ReactNode }) {
  return (
    <State title={props.title ?? "This could not be shown."} role="alert" mark={<Drawing kind="failed" />}>
      <p>{props.message}</p>
      {props.onRetry ? <Button onClick={props.onRetry}>Try again</Button> : null}
      {props.children}
    </State>
  );
}

/** The person's role does not open this page. */
export function NoPermission({ title = "Your role does not open this page.", children }: { title?: string; children?: ReactNode }) {
  return (
    <State title={title} mark={<Drawing kind="closed" />}>
      {children ?? <p>Ask an administrator if you need it for your work.</p>}
    </State>
  );
}
