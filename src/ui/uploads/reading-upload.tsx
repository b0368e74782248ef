import { INGEST_STEPS, type UploadView } from "@/domain/upload";
import { formatNumber } from "@/ui/format";
import { useCity } from "@/ui/shell/city";
import { ProgressBar } from "./progress-bar";
import { STEP_WORDS } from "./upload-words";

/** A file that the worker has in hand, or will have next. */
export function ReadingUpload({ upload }: { upload: UploadView }) {
  const { locale } = useCity();
  const { progress } = upload;
  if (upload.state === "waiting" || !progress) {
    return <p className="px-4 py-6 text-lg sm:px-6">The file waits for its turn. This page follows by itself.</p>;
  }
  const now = INGEST_STEPS.indexOf(progress.step);
  return (
    <div className="flex flex-col gap-5 px-4 py-6 sm:px-6">
      <ProgressBar share={progress.share} label="The file is read" />
      <p role="status">{formatNumber(progress.rowsRead, locale)} rows so far.</p>
      <ol className="flex flex-col gap-1.5">
        {INGEST_STEPS.map((step, at) => (
          <li key={step} aria-current={at === now ? "step" : undefined} className={at === now ? "font-semibold" : at < now ? "" : "text-ink-soft"}>
            <span aria-hidden="true" className="inline-block w-6">
              {at < now ? "✓" : at === now ? "›" : ""}
            </span>
            {STEP_WORDS[step]}
            {at < now ? <span className="sr-only"> (done)</span> : null}
          </li>
        ))}
      </ol>
      <p className="text-sm text-ink-soft">You may leave this page: the file is read in any case.</p>
    </div>
  );
}
