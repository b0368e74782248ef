"use client";

import { useQueryClient } from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import { useId, useRef, useState, type FormEvent } from "react";
import { UPLOAD_KINDS, type UploadKind } from "@/domain/upload";
import { Button } from "@/ui/primitives/button";
import { FileChooser } from "./file-chooser";
import { ProgressBar } from "./progress-bar";
import { uploadsQuery } from "./queries";
import { sendFile, type Sending } from "./send-file";

const KIND_WORDS: Record<UploadKind, { label: string; fields: string }> = {
  pings: { label: "Pings of vehicles", fields: "vehicle, time, latitude, longitude; speed and heading where the supplier has them" },
  junctions: { label: "Junctions of the city", fields: "identifier, name, latitude, longitude; corridor, district, cycle length, last retimed, notes if you keep them" },
  legs: { label: "Leg lines drawn by the city", fields: "GeoJSON lines drawn towards the stop line, each with its junction's identifier; name, speed limit, storage, lanes if you know them" },
};

/** Chooses a file and sends it; what is in it is settled on the next page. */
export function SendForm({ firstKind }: { firstKind: UploadKind }) {
  const [kind, setKind] = useState<UploadKind>(firstKind);
  const [file, setFile] = useState<File | null>(null);
  const [share, setShare] = useState<number | null>(null);
  const [error, setError] = useState<string | null>(null);
  const [isPaused, setPaused] = useState(false);
  const sending = useRef<Sending | null>(null);
  const router = useRouter();
  const client = useQueryClient();
  const id = useId();

  async function send(event: FormEvent) {
    event.preventDefault();
    if (!file) return setError("Choose a file first.");
    setError(null);
    setShare(0);
    setPaused(false);
    try {
      sending.current = sendFile(file, kind, setShare);
      const { uploadId, sameAs } = await sending.current.received;
      void client.invalidateQueries({ queryKey: uploadsQuery().queryKey });
      router.push(sameAs ? `/data/${uploadId}?same=${sameAs.id}` : `/data/${uploadId}`);
    } catch (failure) {
      setShare(null);
      setError(failure instanceof Error ? failure.message : "The file could not be sent.");
    }
  }

  function pauseOrGoOn() {
    if (isPaused) sending.current?.goOn();
    else sending.current?.pause();
    setPaused(!isPaused);
  }

  return (
    <form onSubmit={send} noValidate className="flex flex-col gap-4">
      <fieldset className="flex flex-col gap-1.5" disabled={share !== null}>
        <legend className="mb-1 text-sm font-medium">What is in it</legend>
        {UPLOAD_KINDS.map((value) => (
          <label key={value} className="flex min-h-7 items-baseline gap-2.5">
            <input type="radio" name={`${id}-kind`} value={value} checked={kind === value} onChange={() => setKind(value)} className="relative top-0.5 size-4 shrink-0 accent-pick" />
            <span>
              {KIND_WORDS[value].label}
              <span className="block text-sm text-ink-soft">{KIND_WORDS[value].fields}</span>
            </span>
          </label>
        ))}
      </fieldset>
      <FileChooser file={file} onChoose={setFile} describedBy={`${id}-formats`} />
      <p id={`${id}-formats`} className="text-sm text-ink-soft">
        CSV with comma, semicolon or tab, or GeoJSON; UTF-8; packed with gzip if you like. You see the first rows and confirm the columns before anything is read. A file whose sending was cut off goes on where it stopped when you choose it again.
      </p>
      {share === null ? (
        <Button type="submit" tone="strong" className="self-start">
          Send the file
        </Button>
      ) : (
        <div className="flex flex-col items-start gap-3">
          <p role="status">{share >= 1 ? "Sent. Looking at the first rows…" : isPaused ? "Paused." : "Sending…"}</p>
          <ProgressBar share={share} label="Sent" />
          {share < 1 ? (
            <div className="flex gap-3">
              <Button onClick={pauseOrGoOn}>{isPaused ? "Go on" : "Pause"}</Button>
              <Button onClick={() => sending.current?.stop()}>Stop</Button>
            </div>
          ) : null}
        </div>
      )}
      {error ? (
        <p role="alert" className="font-medium text-tail">
          {error}
        </p>
      ) : null}
    </form>
  );
}
