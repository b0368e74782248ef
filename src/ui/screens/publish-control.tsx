"use client";

import { useRouter } from "next/navigation";
import { useState, type FormEvent } from "react";
import type { ScreenQuery } from "@/domain/screen";
import { counted } from "@/ui/format";
import { Button } from "@/ui/primitives/button";
import { Field, Input } from "@/ui/primitives/field";
import { PopoverPanel, usePopover } from "@/ui/primitives/popover";
import { useCity } from "@/ui/shell/city";
import type { PublishAction } from "./screen-view";

/** Freezes the list, as filtered now, for the readers of hotspot reports. */
export function PublishControl({ query, publish, shown }: { query: ScreenQuery; publish: PublishAction; shown: number }) {
  const popover = usePopover();
  const router = useRouter();
  const { locale } = useCity();
  const [isBusy, setBusy] = useState(false);
  const [problem, setProblem] = useState<string | null>(null);

  async function onSubmit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    setBusy(true);
    setProblem(null);
    const title = String(new FormData(event.currentTarget).get("title"));
    const outcome = await publish({ title, query }).catch(() => ({ ok: false as const, message: "The server cannot be reached. Try again." }));
    setBusy(false);
    if (outcome.ok) router.push(`/hotspots/${outcome.data.id}`);
    else setProblem(outcome.message);
  }

  return (
    <div className="relative">
      <Button ref={popover.trigger} aria-haspopup="dialog" aria-expanded={popover.isOpen} onClick={() => popover.setOpen(!popover.isOpen)} disabled={shown === 0}>
        Publish
      </Button>
      <PopoverPanel popover={popover} label="Publish a hotspot report" align="right">
        <form onSubmit={onSubmit} className="flex w-72 max-w-full flex-col gap-3">
          <Field label="Title of the report" error={problem ?? undefined} hint={`Readers will see these ${counted(shown, "junction", "junctions", locale)} as they stand now, without any vehicle.`}>
            {(told) => <Input {...told} name="title" required minLength={3} maxLength={120} autoComplete="off" />}
          </Field>
          <Button type="submit" tone="strong" disabled={isBusy}>
            {isBusy ? "Publishing…" : "Publish the report"}
          </Button>
        </form>
      </PopoverPanel>
    </div>
  );
}
