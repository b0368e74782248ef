import { unusable } from "../unusable";

const MAX_FEATURE_BYTES = 2 ** 20;
const LF = 10;
const QUOTE = 34;
const BACKSLASH = 92;
const decoder = new TextDecoder("utf-8");

/**
 * Cuts the features out of a FeatureCollection (RFC 7946) as text, without holding more than one of them.
 * It follows strings and brackets only; the caller parses each feature and judges it.
 */
export class FeatureScanner {
  private carry: Uint8Array = new Uint8Array(0);
  private depth = 0;
  private isString = false;
  private isEscaped = false;
  private key = "";
  private isList = false;
  private hasList = false;
  private hasBegun = false;
  private line = 1;
  private featureLine = 1;
  /** Where the feature at hand begins in the bytes at hand; -1 between features. */
  private featureStart = -1;

  constructor(private readonly onFeature: (text: string, line: number) => void) {}

  push(chunk: Uint8Array): void {
    const from = this.carry.length;
    const bytes = new Uint8Array(from + chunk.length);
    bytes.set(this.carry);
    bytes.set(chunk, from);
    for (let at = from; at < bytes.length; at += 1) this.step(bytes, at);
    this.carry = this.featureStart < 0 ? new Uint8Array(0) : bytes.slice(this.featureStart);
    if (this.featureStart >= 0) this.featureStart = 0;
    this.checkLength(this.carry.length);
  }

  /** Lines that were read to their end. */
  get lines(): number {
    return this.line - 1;
  }

  finish(): void {
    if (!this.hasBegun) throw unusable("The file is empty.");
    if (this.depth > 0) throw unusable(`The GeoJSON ends too early, on line ${this.line}: the file is cut off.`);
    if (!this.hasList) throw unusable("The GeoJSON holds no list of features. A FeatureCollection is expected.");
  }

  private step(bytes: Uint8Array, at: number): void {
    const c = bytes[at];
    if (c === LF) this.line += 1;
    if (this.isString) {
      this.stepString(c);
      return;
    }
    if (c === QUOTE) {
      this.isString = true;
      if (this.depth === 1) this.key = "";
      return;
    }
    if (c === 123 || c === 91) this.open(c, at);
    else if (c === 125 || c === 93) this.close(bytes, at);
    else if (this.depth === 0 && c > 32) this.stray(c);
  }

  private stepString(c: number): void {
    if (this.isEscaped) this.isEscaped = false;
    else if (c === BACKSLASH) this.isEscaped = true;
    else if (c === QUOTE) this.isString = false;
    else if (this.depth === 1 && this.key.length < 16) this.key += String.fromCharCode(c);
  }

  private open(c: number, at: number): void {
    if (this.depth === 0) {
      if (this.hasBegun || c !== 123) this.stray(c);
      this.hasBegun = true;
    }
    if (this.depth === 1 && c === 91 && this.key === "features") {
      this.isList = true;
      this.hasList = true;
    }
    if (this.isList && this.depth === 2 && c === 123) {
      this.featureStart = at;
      this.featureLine = this.line;
    }
    this.depth += 1;
  }

  private close(bytes: Uint8Array, at: number): void {
    if (this.depth === 0) this.stray(bytes[at]);
    this.depth -= 1;
    if (this.depth === 1) this.isList = false;
    if (this.depth !== 2 || this.featureStart < 0) return;
    this.checkLength(at + 1 - this.featureStart);
    this.onFeature(decoder.decode(bytes.subarray(this.featureStart, at + 1)), this.featureLine);
    this.featureStart = -1;
  }

  private checkLength(bytes: number): void {
    if (bytes <= MAX_FEATURE_BYTES) return;
    throw unusable(`The feature on line ${this.featureLine} is longer than 1 MiB. This does not look like a file of points.`);
  }

  private stray(c: number): void {
    // A byte order mark may stand before the first bracket.
    if (!this.hasBegun && (c === 0xef || c === 0xbb || c === 0xbf)) return;
    throw unusable(`This is not GeoJSON: an unexpected character stands on line ${this.line}.`);
  }
}
