const FNV_OFFSET = 0x811c9dc5;
const FNV_PRIME = 0x01000193;
const decoder = new TextDecoder("utf-8");
const encoder = new TextEncoder();

/**
 * Names to dense numbers from 0, straight from the bytes of a file: 20 bytes and the name for each vehicle.
 * Several files share one dictionary.
 */
export class VehicleNames {
  size = 0;
  /** Number plus one; 0 is free. Never more than half full. */
  private slots = new Uint32Array(1024);
  private hashes = new Uint32Array(512);
  private offsets = new Uint32Array(513);
  private text = new Uint8Array(8192);

  intern(bytes: Uint8Array, start: number, end: number): number {
    const hash = fnv1a(bytes, start, end);
    const mask = this.slots.length - 1;
    let slot = hash & mask;
    for (let entry = this.slots[slot]; entry !== 0; entry = this.slots[slot]) {
      if (this.hashes[entry - 1] === hash && this.isName(entry - 1, bytes, start, end)) return entry - 1;
      slot = (slot + 1) & mask;
    }
    return this.add(slot, hash, bytes, start, end);
  }

  internText(name: string): number {
    const bytes = encoder.encode(name);
    return this.intern(bytes, 0, bytes.length);
  }

  nameOf(vehicle: number): string {
    return decoder.decode(this.text.subarray(this.offsets[vehicle], this.offsets[vehicle + 1]));
  }

  private isName(vehicle: number, bytes: Uint8Array, start: number, end: number): boolean {
    const from = this.offsets[vehicle];
    if (this.offsets[vehicle + 1] - from !== end - start) return false;
    for (let i = start, j = from; i < end; i += 1, j += 1) if (bytes[i] !== this.text[j]) return false;
    return true;
  }

  private add(slot: number, hash: number, bytes: Uint8Array, start: number, end: number): number {
    const vehicle = this.size;
    const isFull = vehicle === this.hashes.length;
    if (isFull) this.grow();
    const from = this.offsets[vehicle];
    const to = from + end - start;
    if (to > this.text.length) this.text = enlarged(this.text, Math.max(to, this.text.length * 2));
    this.text.set(bytes.subarray(start, end), from);
    this.offsets[vehicle + 1] = to;
    this.hashes[vehicle] = hash;
    this.size += 1;
    this.slots[isFull ? this.freeSlot(hash) : slot] = vehicle + 1;
    return vehicle;
  }

  private freeSlot(hash: number): number {
    const mask = this.slots.length - 1;
    let slot = hash & mask;
    while (this.slots[slot] !== 0) slot = (slot + 1) & mask;
    return slot;
  }

  private grow(): void {
    const capacity = this.hashes.length * 2;
    const hashes = new Uint32Array(capacity);
    hashes.set(this.hashes);
    this.hashes = hashes;
    const offsets = new Uint32Array(capacity + 1);
    offsets.set(this.offsets);
    this.offsets = offsets;
    this.slots = new Uint32Array(capacity * 2);
    for (let vehicle = 0; vehicle < this.size; vehicle += 1) this.slots[this.freeSlot(hashes[vehicle])] = vehicle + 1;
  }
}

function fnv1a(bytes: Uint8Array, start: number, end: number): number {
  let hash = FNV_OFFSET;
  for (let i = start; i < end; i += 1) hash = Math.imul(hash ^ bytes[i], FNV_PRIME);
  return hash >>> 0;
}

function enlarged(bytes: Uint8Array, size: number): Uint8Array<ArrayBuffer> {
  const larger = new Uint8Array(size);
  larger.set(bytes);
  return larger;
}
