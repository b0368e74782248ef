/** A CSV file that the browser saves under the name. */
export function csvResponse(body: string | ReadableStream<Uint8Array>, fileName: string): Response {
  return new Response(body, {
    headers: {
      "content-type": "text/csv; charset=utf-8",
      "content-disposition": `attachment; filename="${fileName}"`,
      "cache-control": "private, no-store",
    },
  });
}
