/** Longer values are no value of a ping. */
const MAX_VALUE_CHARS = 500;

/** The values of one JSON object, written one after the other as bytes. */
export class ValueLine {
  /** Six values of at most three bytes for each character. */
  readonly bytes = new Uint8Array(6 * 3 * MAX_VALUE_CHARS);
  private readonly encoder = new TextEncoder();
  private end = 0;

  constructor(private readonly spans: Int32Array) {}

  clear(): void {
    this.end = 0;
  }

  put(field: number, value: string): void {
    const { written } = this.encoder.encodeInto(value.slice(0, MAX_VALUE_CHARS), this.bytes.subarray(this.end));
    this.spans[2 * field] = this.end;
    this.end += written;
    this.spans[2 * field + 1] = this.end;
  }
}
