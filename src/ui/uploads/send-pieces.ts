import { DefaultHttpStack, defaultOptions, Upload, type DetailedError, type HttpStack } from "tus-js-client";
import { RequestError } from "@/ui/query-client";

const ENDPOINT = "/api/uploads/parts";
const PIECE_BYTES = 8 * 2 ** 20;
/** Waits before a piece is sent again, ms: a short loss of the line is bridged without a word. */
const RETRY_MS = [0, 1_000, 3_000, 10_000, 30_000];
/** Answers after which a piece may be sent again: in use, elsewhere, damaged on the way. */
const PASSING = [409, 423, 460];
const NO_ROOM = 507;
const OUT_OF_REACH = "The file did not reach the server. Check the connection and send it again: it goes on where it stopped.";

export interface Pieces {
  pause(): void;
  goOn(): void;
  /** Gives the file up; nothing of it is kept. */
  stop(): void;
  /** Identifier of the part, once it has arrived whole. */
  arrived: Promise<string>;
  /** Forgets that this file was under way. */
  forget(): Promise<void>;
}

/** Sends a file in pieces by the tus protocol; the same file chosen again goes on where it stopped, after a reload too. */
export function sendPieces(file: File, onShare: (share: number) => void): Pieces {
  let isStopped = false;
  let settle: { resolve: (partId: string) => void; reject: (error: Error) => void };
  const arrived = new Promise<string>((resolve, reject) => (settle = { resolve, reject }));
  const upload = new Upload(file, {
    endpoint: ENDPOINT,
    chunkSize: PIECE_BYTES,
    retryDelays: RETRY_MS,
    metadata: { filename: file.name },
    httpStack: checksummed(),
    onShouldRetry: (error) => isPassing(error),
    onProgress: (sent, total) => onShare(total > 0 ? sent / total : 0),
    onError: (error) => settle.reject(inWords(error)),
    onSuccess: () => settle.resolve(upload.url?.split("/").at(-1) ?? ""),
  });
  void begin(upload, () => isStopped);
  return {
    arrived,
    pause: () => void upload.abort(),
    goOn: () => upload.start(),
    stop() {
      isStopped = true;
      void upload.abort(true).catch(() => undefined);
      settle.reject(new RequestError(0, "Sending was stopped. Nothing was kept."));
    },
    async forget() {
      for (const { urlStorageKey } of await upload.findPreviousUploads()) await defaultOptions.urlStorage.removeUpload(urlStorageKey);
    },
  };
}

async function begin(upload: Upload, isStopped: () => boolean): Promise<void> {
  const [earlier] = await upload.findPreviousUploads().catch(() => []);
  if (isStopped()) return;
  if (earlier) upload.resumeFromPreviousUpload(earlier);
  upload.start();
}

function isPassing(error: DetailedError): boolean {
  const status = error.originalResponse?.getStatus() ?? 0;
  return status === 0 || (status >= 500 && status !== NO_ROOM) || PASSING.includes(status);
}

function inWords(error: Error | DetailedError): RequestError {
  const response = "originalResponse" in error ? error.originalResponse : null;
  if (!response) return new RequestError(0, OUT_OF_REACH);
  return new RequestError(response.getStatus(), messageOf(response.getBody()) ?? `The server answered ${response.getStatus()}.`);
}

function messageOf(body: string): string | null {
  try {
    return (JSON.parse(body) as { message?: string }).message ?? null;
  } catch {
    return null;
  }
}

/** Names the SHA-256 of every piece. Browsers count it only for pages that came by HTTPS or from this machine. */
function checksummed(): HttpStack {
  const plain = new DefaultHttpStack({});
  return {
    getName: () => plain.getName(),
    createRequest(method, url) {
      const request = plain.createRequest(method, url);
      const send = request.send.bind(request);
      request.send = async (body: Blob | undefined) => {
        if (method === "PATCH" && body && globalThis.isSecureContext) request.setHeader("Upload-Checksum", `sha256 ${await sha256(body)}`);
        return send(body);
      };
      return request;
    },
  };
}

async function sha256(piece: Blob): Promise<string> {
  const digest = new Uint8Array(await crypto.subtle.digest("SHA-256", await piece.arrayBuffer()));
  return btoa(String.fromCharCode(...digest));
}
