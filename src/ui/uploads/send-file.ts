import type { FileMapping, UploadKind } from "@/domain/upload";
import { RequestError } from "@/ui/query-client";
import { sendPieces, type Pieces } from "./send-pieces";

export interface ReceivedFile {
  uploadId: string;
  /** An earlier upload of the very same bytes. */
  sameAs: { id: string; createdAt: string } | null;
}

export interface Sending extends Pick<Pieces, "pause" | "goOn" | "stop"> {
  received: Promise<ReceivedFile>;
}

/** Sends a file from the disk to the server; `onShare` tells how much of it is there, from 0 to 1. */
export function sendFile(file: File, kind: UploadKind, onShare: (share: number) => void): Sending {
  const { arrived, forget, pause, goOn, stop } = sendPieces(file, onShare);
  const received = arrived.then(async (part) => {
    try {
      const answer = await change(`/api/uploads?${new URLSearchParams({ kind, name: file.name, part })}`, "POST");
      await forget();
      return (await answer.json()) as ReceivedFile;
    } catch (error) {
      // Refused for what it is: it need not be gone on with.
      if (error instanceof RequestError && error.status >= 400 && error.status < 500) await forget();
      throw error;
    }
  });
  return { received, pause, goOn, stop };
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

async function change(path: string, method: "POST" | "DELETE", body?: unknown): Promise<Response> {
  const json = body === undefined ? {} : { headers: { "content-type": "application/json" }, body: JSON.stringify(body) };
  const answer = await fetch(path, { method, ...json }).catch(() => null);
  if (answer === null) throw new RequestError(0, "The server cannot be reached. Check the connection and try again.");
  if (answer.ok) return answer;
  const problem = (await answer.json().catch(() => null)) as { message?: string } | null;
  throw new RequestError(answer.status, problem?.message ?? `The server answered ${answer.status}.`);
}
