"use client";

import { useState } from "react";
import type { UploadView } from "@/domain/upload";
import { Button, ButtonLink } from "@/ui/primitives/button";
import { Failed } from "@/ui/primitives/states";
import { useCan } from "@/ui/shell/city";
import { DiscardButton } from "./discard-button";
import { ReceivedUpload } from "./received-upload";
import { UploadReport } from "./upload-report";

/** A file that could not be read in: why, and what can be done about it. */
export function FailedUpload({ upload }: { upload: UploadView }) {
  const [isAgain, setAgain] = useState(false);
  const maySend = useCan("upload.create");
  if (isAgain) return <ReceivedUpload upload={upload} />;
  return (
    <>
      <Failed title="This file could not be read in." message={upload.failure ?? "The reason was not kept."}>
        {maySend ? (
          <div className="flex flex-wrap items-center gap-3">
            <Button onClick={() => setAgain(true)}>Change its columns, read it again</Button>
            <ButtonLink href="/data">Send another file</ButtonLink>
            <DiscardButton uploadId={upload.id} />
          </div>
        ) : null}
      </Failed>
      {upload.report ? <UploadReport upload={upload} report={upload.report} /> : null}
    </>
  );
}
