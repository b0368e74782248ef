"use client";

import { useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useState } from "react";
import { Button } from "@/ui/primitives/button";
import { useCan } from "@/ui/shell/city";
import { uploadsQuery } from "./queries";
import { discardFile } from "./send-file";

/** Forgets a file of which nothing was read in; asks once more before it does. */
export function DiscardButton({ uploadId }: { uploadId: string }) {
  const [step, setStep] = useState<"offered" | "asked" | "sent">("offered");
  const [error, setError] = useState<string | null>(null);
  const router = useRouter();
  const client = useQueryClient();
  const mayDiscard = useCan("upload.create");
  if (!mayDiscard) return null;

  async function discard() {
    setStep("sent");
    try {
      await discardFile(uploadId);
      await client.invalidateQueries({ queryKey: uploadsQuery().queryKey, exact: true });
      router.push("/data");
    } catch (failure) {
      setStep("offered");
      setError(failure instanceof Error ? failure.message : "The file could not be discarded.");
    }
  }

  if (step === "offered") {
    return (
      <div className="flex flex-wrap items-center gap-3">
        <Button onClick={() => setStep("asked")}>Discard the file</Button>
        {error ? (
          <p role="alert" className="font-medium text-tail">
            {error}
          </p>
        ) : null}
      </div>
    );
  }
  return (
    <div role="group" aria-label="Discard the file" className="flex flex-wrap items-center gap-3">
      <p role="status">Nothing of it was read in. Discard it?</p>
      <Button autoFocus tone="strong" disabled={step === "sent"} onClick={() => void discard()}>
        Yes, discard
      </Button>
      <Button disabled={step === "sent"} onClick={() => setStep("offered")}>
        Keep it
      </Button>
    </div>
  );
}
