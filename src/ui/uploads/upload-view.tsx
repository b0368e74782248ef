"use client";

import { useQuery } from "@tanstack/react-query";
import Link from "next/link";
import type { ReactNode } from "react";
import type { UploadView as Upload } from "@/domain/upload";
import { formatBytes, formatInstant } from "@/ui/format";
import { Failed, Loading } from "@/ui/primitives/states";
import { useCity } from "@/ui/shell/city";
import { PageHead } from "@/ui/shell/page-head";
import { useFreshFigures } from "@/ui/use-fresh-figures";
import { FailedUpload } from "./failed-upload";
import { isUnderWay, uploadQuery } from "./queries";
import { ReadingUpload } from "./reading-upload";
import { ReceivedUpload } from "./received-upload";
import { UploadReport } from "./upload-report";
import { KIND_NAMES } from "./upload-words";

/** One file, from the moment it was sent to its report. */
export function UploadView({ uploadId, sameAs }: { uploadId: string; sameAs: string | null }) {
  const { data: upload, error, refetch } = useQuery(uploadQuery(uploadId));
  useFreshFigures(upload !== undefined && isUnderWay(upload));
  if (error) return <Failed title="This file could not be shown." message={error.message} onRetry={() => void refetch()} />;
  if (!upload) return <Loading title="Reading the report" />;
  return (
    <>
      <PageHead
        title={<span className="break-all">{upload.fileName}</span>}
        above={
          <Link href="/data" className="text-link">
            Data
          </Link>
        }
      >
        <About upload={upload} />
        {sameAs && upload.state === "received" ? (
          <p className="mt-1">
            The very same file was sent before:{" "}
            <Link href={`/data/${sameAs}`} className="text-link">
              see its report
            </Link>
            . Reading it again changes no figure.
          </p>
        ) : null}
      </PageHead>
      <Body upload={upload} />
    </>
  );
}

function About({ upload }: { upload: Upload }) {
  const { locale, settings } = useCity();
  const parts = [
    `A file of ${KIND_NAMES[upload.kind]}, ${formatBytes(upload.bytes, locale)}`,
    upload.supplier ? `from ${upload.supplier}` : null,
    `sent ${formatInstant(upload.createdAt, locale, settings.timeZone)}${upload.by ? ` by ${upload.by}` : ""}`,
  ];
  return <p className="mt-1 text-ink-soft">{parts.filter(Boolean).join(", ")}.</p>;
}

function Body({ upload }: { upload: Upload }): ReactNode {
  const { state, report } = upload;
  switch (state) {
    case "received":
      return <ReceivedUpload upload={upload} />;
    case "waiting":
    case "reading":
      return <ReadingUpload upload={upload} />;
    case "done":
      return report ? <UploadReport upload={upload} report={report} /> : <Failed title="The report is missing." message="The file is in, but no report was kept." />;
    case "failed":
      return <FailedUpload upload={upload} />;
    default:
      return state satisfies never;
  }
}
