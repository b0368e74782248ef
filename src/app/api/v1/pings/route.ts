import { route } from "@/server/route";
import { receiveBatch } from "@/services/feed/receive-batch";

export const POST = route(async (ctx, _params, request) => {
  const shown = { authorization: request.headers.get("authorization"), idempotencyKey: request.headers.get("idempotency-key") };
  // A body is an async iterable in Node; its type here is the browser's.
  const content = (request.body ?? new Blob([]).stream()) as unknown as AsyncIterable<Uint8Array>;
  const receipt = await receiveBatch(ctx, shown, content);
  const isNew = receipt.batch !== null && !receipt.repeated;
  return Response.json(receipt, { status: isNew ? 202 : 200, headers: { "cache-control": "no-store" } });
});
