"use client";

import { useQuery } from "@tanstack/react-query";
import { useState } from "react";
import type { UploadView } from "@/domain/upload";
import { ButtonLink } from "@/ui/primitives/button";
import { Failed, Loading, NoPermission } from "@/ui/primitives/states";
import { useCan } from "@/ui/shell/city";
import { DiscardButton } from "./discard-button";
import { MappingForm } from "./mapping-form";
import { detectedQuery, type SettledShape } from "./queries";

/** A file that was sent and waits for a person to confirm what its columns hold. */
export function ReceivedUpload({ upload }: { upload: UploadView }) {
  const canStart = useCan("upload.create");
  if (!canStart) {
    return (
      <NoPermission title="Only an engineer may have this file read.">
        <p>It was sent, but its columns are not confirmed yet.</p>
      </NoPermission>
    );
  }
  return <Confirm upload={upload} />;
}

function Confirm({ upload }: { upload: UploadView }) {
  const [settled, setSettled] = useState<SettledShape>({});
  const detected = useQuery(detectedQuery(upload.id, settled));
  if (detected.isPending) return <Loading title="Looking at the first rows" />;
  if (detected.isError) {
    return (
      <Failed title="The first rows cannot be read." message={detected.error.message} onRetry={() => void detected.refetch()}>
        <ButtonLink href="/data">Send another file</ButtonLink>
        <DiscardButton uploadId={upload.id} />
      </Failed>
    );
  }
  return <MappingForm upload={upload} detection={detected.data} onReshape={(part) => setSettled((before) => ({ ...before, ...part }))} />;
}
