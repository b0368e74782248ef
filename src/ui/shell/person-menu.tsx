"use client";

import { useState } from "react";
import type { Role } from "@/domain/actor";
import { Button } from "@/ui/primitives/button";
import { PopoverPanel, usePopover } from "@/ui/primitives/popover";

export interface Person {
  name: string;
  email: string;
  role: Role;
}

export function PersonMenu({ person, cityName }: { person: Person; cityName: string }) {
  const popover = usePopover();
  const [isLeaving, setLeaving] = useState(false);

  async function leave() {
    setLeaving(true);
    // Needed once in a session: pages do not wait for it.
    const { signOut } = await import("next-auth/react");
    await signOut({ callbackUrl: "/sign-in" });
  }

  return (
    <div className="relative text-sm text-ink-soft">
      <button
        ref={popover.trigger}
        type="button"
        aria-haspopup="dialog"
        aria-expanded={popover.isOpen}
        aria-controls={popover.isOpen ? popover.id : undefined}
        onClick={() => popover.setOpen(!popover.isOpen)}
        className="min-h-9 border-b border-transparent hover:border-rule hover:text-ink"
      >
        {cityName}, {person.role}
      </button>
      <PopoverPanel popover={popover} label="Your account" align="right">
        <p className="font-medium">{person.name}</p>
        <p className="mb-3 text-sm text-ink-soft">
          {person.email}, {person.role}
        </p>
        <Button onClick={leave} disabled={isLeaving}>
          {isLeaving ? "Signing out…" : "Sign out"}
        </Button>
      </PopoverPanel>
    </div>
  );
}
