import { unusable } from "../unusable";

const EXPECTED = "Send CSV (UTF-8) or GeoJSON, packed with gzip if you like.";

/** First bytes of kinds of file that people send by mistake. */
const MAGIC: readonly [number[], string][] = [
  [[0x50, 0x4b, 0x03, 0x04], "This is a zip archive or a spreadsheet."],
  [[0xd0, 0xcf, 0x11, 0xe0], "This is an old spreadsheet or document."],
  [[0x50, 0x41, 0x52, 0x31], "This is a Parquet file."],
  [[0x25, 0x50, 0x44, 0x46], "This is a PDF."],
  [[0x28, 0xb5, 0x2f, 0xfd], "This is packed with zstd."],
  [[0x42, 0x5a, 0x68], "This is packed with bzip2."],
  [[0xfd, 0x37, 0x7a, 0x58, 0x5a], "This is packed with xz."],
  [[0xff, 0xfe], "The text is in UTF-16."],
  [[0xfe, 0xff], "The text is in UTF-16."],
];
/** Share of bytes that are no text from which on a file counts as binary. */
const MAX_ODD_SHARE = 0.02;

/** Throws a sentence if the bytes are not those of a text file; else says how many characters are not UTF-8. */
export function refuseBinary(bytes: Uint8Array): number {
  for (const [magic, sentence] of MAGIC) {
    if (magic.every((byte, i) => bytes[i] === byte)) throw unusable(`${sentence} ${EXPECTED}`);
  }
  const text = new TextDecoder("utf-8").decode(bytes);
  let odd = 0;
  let undecoded = 0;
  for (let i = 0; i < text.length; i += 1) {
    const code = text.charCodeAt(i);
    if (code === 0xfffd) undecoded += 1;
    if (code === 0xfffd || (code < 32 && code !== 9 && code !== 10 && code !== 13)) odd += 1;
  }
  if (odd > 1 && odd > text.length * MAX_ODD_SHARE) throw unusable(`This is not a text file. ${EXPECTED}`);
  return undecoded;
}
