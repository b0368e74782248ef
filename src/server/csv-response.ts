import { Readable } from "node:stream";

/** A CSV file that the browser saves under the name, sent as it is written. */
export function csvResponse(content: AsyncIterable<string | Uint8Array>, fileName: string): Response {
  return new Response(Readable.toWeb(Readable.from(content, { objectMode: false })) as ReadableStream<Uint8Array>, {
    headers: {
      "content-type": "text/csv; charset=utf-8",
      "content-disposition": `attachment; filename="${fileName}"`,
      "cache-control": "private, no-store",
    },
  });
}
