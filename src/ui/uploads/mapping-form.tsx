"use client";

import { useQuery, useQueryClient } from "@tanstack/react-query";
import { useId, useState, type FormEvent } from "react";
import { isLocalTime, neededFields, type Detection, type UploadView } from "@/domain/upload";
import { isTimeZone } from "@/domain/settings";
import { Button } from "@/ui/primitives/button";
import { Field, Input } from "@/ui/primitives/field";
import { DiscardButton } from "./discard-button";
import { MappingSentence } from "./mapping-sentence";
import { fieldList, headerToKeep, missingFields } from "./mapping-state";
import { PreviewTable } from "./preview-table";
import { suppliersQuery, uploadsQuery, type SettledShape } from "./queries";
import { startReading } from "./send-file";
import { useMapping, type SupplierMatch } from "./use-mapping";

interface Props {
  upload: UploadView;
  detection: Detection;
  onReshape: (settled: SettledShape) => void;
}

/** The last look before a file is read: how it is cut, what its columns hold, who it comes from. */
export function MappingForm({ upload, detection, onReshape }: Props) {
  const { kind } = upload;
  const controls = useMapping(detection);
  const { mapping, supplier } = controls;
  const [note, setNote] = useState("");
  const [error, setError] = useState<string | null>(null);
  const [isStarting, setStarting] = useState(false);
  const client = useQueryClient();
  const missing = missingFields(mapping, kind);

  function reshape(settled: SettledShape) {
    controls.forgetColumns();
    onReshape(settled);
  }

  async function start(event: FormEvent) {
    event.preventDefault();
    if (missing.length > 0) return setError(`Say which column holds ${fieldList(missing)}.`);
    if (isLocalTime(mapping.timeFormat) && !isTimeZone(mapping.timeZone)) return setError(`${mapping.timeZone || "An empty text"} is not a time zone.`);
    setError(null);
    setStarting(true);
    try {
      await startReading(upload.id, { ...mapping, header: headerToKeep(mapping, detection.header) }, supplier);
      await client.invalidateQueries({ queryKey: uploadsQuery().queryKey });
    } catch (failure) {
      setStarting(false);
      setError(failure instanceof Error ? failure.message : "The file could not be started.");
    }
  }

  return (
    <form onSubmit={start} noValidate className="flex flex-col gap-5 px-4 py-5 sm:px-6">
      <SupplierField
        upload={upload}
        value={supplier}
        onChange={(name, match) => setNote(noteOf(name.trim(), match))}
        controls={controls}
      />
      <p role="status" className={note ? "text-sm" : "sr-only"}>
        {note}
      </p>
      <MappingSentence kind={kind} mapping={mapping} gzip={detection.gzip} onChange={controls.change} onReshape={reshape} />
      {detection.remarks.length > 0 ? (
        <ul className="flex flex-col gap-1 border-l-[3px] border-tail pl-3">
          {detection.remarks.map((remark) => (
            <li key={remark}>{remark}</li>
          ))}
        </ul>
      ) : null}
      <PreviewTable kind={kind} detection={detection} mapping={mapping} needed={neededFields(kind, mapping.format)} onUse={controls.useColumn} />
      {error ? (
        <p role="alert" className="font-medium text-tail">
          {error}
        </p>
      ) : null}
      <div className="flex flex-wrap items-center gap-4">
        <Button type="submit" tone="strong" disabled={isStarting}>
          {isStarting ? "Starting…" : "Read the file"}
        </Button>
        <DiscardButton uploadId={upload.id} />
        <p className="text-sm text-ink-soft">{missing.length > 0 ? `Still needed: ${fieldList(missing)}.` : "All that is needed is there. Rows that cannot be read are listed afterwards."}</p>
      </div>
    </form>
  );
}

function noteOf(name: string, match: SupplierMatch): string {
  if (match === "taken") return `Columns and units are set as for the last file of ${name}.`;
  return match === "differs" ? `The last file of ${name} had other columns: those found in this one are kept.` : "";
}

function SupplierField(props: { upload: UploadView; value: string; onChange: (name: string, match: SupplierMatch) => void; controls: ReturnType<typeof useMapping> }) {
  const listId = useId();
  const suppliers = useQuery(suppliersQuery(props.upload.kind)).data ?? [];
  return (
    <Field label="Supplier" hint="Optional. The next file of the same supplier is read in the same way." className="max-w-md">
      {(told) => (
        <>
          <Input
            {...told}
            list={listId}
            maxLength={80}
            autoComplete="off"
            value={props.value}
            onChange={(event) => props.onChange(event.target.value, props.controls.chooseSupplier(event.target.value, suppliers))}
          />
          <datalist id={listId}>
            {suppliers.map(({ id, name }) => (
              <option key={id} value={name} />
            ))}
          </datalist>
        </>
      )}
    </Field>
  );
}
