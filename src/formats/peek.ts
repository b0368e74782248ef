export interface Peeked {
  /** The first bytes: as many as asked for, or all there are. */
  head: Uint8Array;
  /** Everything, the first bytes included. To be read once. */
  all: AsyncIterable<Uint8Array>;
}

/** Looks at the beginning of a stream that can be read only once. */
export async function peek(chunks: AsyncIterable<Uint8Array>, headBytes: number): Promise<Peeked> {
  const source = chunks[Symbol.asyncIterator]();
  const seen: Uint8Array[] = [];
  let size = 0;
  while (size < headBytes) {
    const next = await source.next();
    if (next.done) break;
    seen.push(next.value);
    size += next.value.length;
  }
  return { head: new Uint8Array(Buffer.concat(seen)), all: replay(seen, source) };
}

async function* replay(seen: Uint8Array[], source: AsyncIterator<Uint8Array>): AsyncGenerator<Uint8Array> {
  try {
    yield* seen.splice(0);
    for (let next = await source.next(); !next.done; next = await source.next()) yield next.value;
  } finally {
    await source.return?.();
  }
}
