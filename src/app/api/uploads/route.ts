import { AppError } from "@/domain/errors";
import { openArrived, removeArrived } from "@/server/arriving";
import { route } from "@/server/route";
import { listUploads } from "@/services/uploads/list-uploads";
import type { Context } from "@/services/context";
import { receiveUpload, type ReceivedUpload, type ReceiveUpload } from "@/services/uploads/receive-upload";

export const GET = route(async (ctx) => Response.json(await listUploads(ctx)));

export const POST = route(async (ctx, _params, request) => {
  const search = new URL(request.url).searchParams;
  const about = { kind: search.get("kind") ?? "", name: search.get("name") ?? "" };
  const part = search.get("part");
  if (part !== null) return Response.json(await receiveArrived(ctx, about as ReceiveUpload, part), { status: 201 });
  if (!request.body) throw new AppError("invalid", "The request carries no file.");
  // A body is an async iterable in Node; its type here is the browser's.
  const content = request.body as unknown as AsyncIterable<Uint8Array>;
  return Response.json(await receiveUpload(ctx, about as ReceiveUpload, content), { status: 201 });
});

/** A file that came in pieces. What is refused for what it is need not come again; after a fault on our side it is still there. */
async function receiveArrived(ctx: Context, about: ReceiveUpload, part: string): Promise<ReceivedUpload> {
  const content = await openArrived(ctx, part);
  try {
    const received = await receiveUpload(ctx, about, content);
    await removeArrived(part);
    return received;
  } catch (error) {
    if (error instanceof AppError && error.code === "invalid") await removeArrived(part);
    throw error;
  }
}
