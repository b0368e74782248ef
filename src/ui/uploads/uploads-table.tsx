"use client";

import Link from "next/link";
import type { UploadView } from "@/domain/upload";
import { formatBytes, formatInstant } from "@/ui/format";
import { classNames } from "@/ui/primitives/class-names";
import { RuledTable, Td, Th } from "@/ui/primitives/table";
import { useCity } from "@/ui/shell/city";
import { ProgressBar } from "./progress-bar";
import { KIND_NAMES, outcomeWords, STATE_NAMES } from "./upload-words";

export function UploadsTable({ uploads }: { uploads: UploadView[] }) {
  return (
    <RuledTable caption="Files sent, newest first">
      <thead>
        <tr>
          <Th>file</Th>
          <Th>state</Th>
          <Th className="hidden sm:table-cell">sent</Th>
        </tr>
      </thead>
      <tbody>
        {uploads.map((upload) => (
          <UploadRow key={upload.id} upload={upload} />
        ))}
      </tbody>
    </RuledTable>
  );
}

function UploadRow({ upload }: { upload: UploadView }) {
  const { locale, settings } = useCity();
  const sent = formatInstant(upload.createdAt, locale, settings.timeZone);
  const about = [KIND_NAMES[upload.kind], formatBytes(upload.bytes, locale), upload.supplier].filter(Boolean).join(", ");
  return (
    <tr>
      <Td>
        <Link href={`/data/${upload.id}`} className="text-link break-all font-medium">
          {upload.fileName}
        </Link>
        <span className="block text-sm text-ink-soft">{about}</span>
        <span className="block text-sm text-ink-soft sm:hidden">{sent}</span>
      </Td>
      <Td>
        <UploadState upload={upload} />
      </Td>
      <Td className="hidden whitespace-nowrap sm:table-cell">
        {sent}
        {upload.by ? <span className="block text-sm text-ink-soft">by {upload.by}</span> : null}
      </Td>
    </tr>
  );
}

function UploadState({ upload }: { upload: UploadView }) {
  const { locale } = useCity();
  return (
    <>
      <span className={classNames("font-medium", upload.state === "failed" && "text-tail")}>{STATE_NAMES[upload.state]}</span>
      {upload.state === "reading" && upload.progress ? <ProgressBar share={upload.progress.share} label={`${upload.fileName} read`} /> : null}
      <span className="block text-sm text-ink-soft">{outcomeWords(upload, locale)}</span>
    </>
  );
}
