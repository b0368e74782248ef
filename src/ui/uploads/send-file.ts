import type { FileMapping, UploadKind } from "@/domain/upload";
import { RequestError } from "@/ui/query-client";

export interface ReceivedFile {
  uploadId: string;
  /** An earlier upload of the very same bytes. */
  sameAs: { id: string; createdAt: string } | null;
}

const OUT_OF_REACH = "The file did not reach the server. Check the connection and send it again.";

/** Streams a file from the disk to the server; `onShare` tells how much of it is there, from 0 to 1. */
export function sendFile(file: File, kind: UploadKind, onShare: (share: number) => void, signal: AbortSignal): Promise<ReceivedFile> {
  return new Promise((resolve, reject) => {
    // fetch cannot tell how far an upload has come.
    const request = new XMLHttpRequest();
    const params = new URLSearchParams({ kind, name: file.name });
    request.open("POST", `/api/uploads?${params}`);
    request.setRequestHeader("content-type", "application/octet-stream");
    request.responseType = "json";
    request.upload.onprogress = (event) => onShare(event.lengthComputable ? event.loaded / event.total : 0);
    request.onload = () => {
      const answer = request.response as (ReceivedFile & { message?: string }) | null;
      if (request.status === 201 && answer) resolve(answer);
      else reject(new RequestError(request.status, answer?.message ?? `The server answered ${request.status}.`));
    };
    request.onerror = () => reject(new RequestError(0, OUT_OF_REACH));
    request.onabort = () => reject(new RequestError(0, "Sending was stopped. Nothing was kept."));
    signal.addEventListener("abort", () => request.abort());
    request.send(file);
  });
}

/** Has a received file read in the way that the person settled on. */
export async function startReading(uploadId: string, mapping: FileMapping, supplier: string): Promise<void> {
  const name = supplier.trim();
  await change(`/api/uploads/${uploadId}/start`, "POST", { mapping, supplier: name === "" ? null : name });
}

/** Has the server forget a file of which nothing was read in. */
export async function discardFile(uploadId: string): Promise<void> {
  await change(`/api/uploads/${uploadId}`, "DELETE");
}

async function change(path: string, method: "POST" | "DELETE", body?: unknown): Promise<void> {
  const json = body === undefined ? {} : { headers: { "content-type": "application/json" }, body: JSON.stringify(body) };
  const answer = await fetch(path, { method, ...json }).catch(() => null);
  if (answer === null) throw new RequestError(0, "The server cannot be reached. Check the connection and try again.");
  if (answer.ok) return;
  const problem = (await answer.json().catch(() => null)) as { message?: string } | null;
  throw new RequestError(answer.status, problem?.message ?? `The server answered ${answer.status}.`);
}
