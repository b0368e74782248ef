import { AppError } from "@/domain/errors";
import { route } from "@/server/route";
import { listUploads } from "@/services/uploads/list-uploads";
import { receiveUpload, type ReceiveUpload } from "@/services/uploads/receive-upload";

export const GET = route(async (ctx) => Response.json(await listUploads(ctx)));

export const POST = route(async (ctx, _params, request) => {
  const search = new URL(request.url).searchParams;
  const about = { kind: search.get("kind") ?? "", name: search.get("name") ?? "" };
  if (!request.body) throw new AppError("invalid", "The request carries no file.");
  // A body is an async iterable in Node; its type here is the browser's.
  const content = request.body as unknown as AsyncIterable<Uint8Array>;
  return Response.json(await receiveUpload(ctx, about as ReceiveUpload, content), { status: 201 });
});
