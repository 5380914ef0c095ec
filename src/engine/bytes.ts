/** A growing run of bytes with WebAssembly's number encodings (WebAssembly Core Specification, section 5.2). */
export class ByteWriter {
  private bytes = new Uint8Array(256)
  private used = 0

  get length(): number {
    return this.used
  }

  byte(value: number): void {
    if (this.used === this.bytes.length) this.grow(1)
    this.bytes[this.used++] = value
  }

  /** Unsigned LEB128 of a whole number below 2^32. */
  unsigned(value: number): void {
    let rest = value >>> 0
    while (rest > 0x7f) {
      this.byte((rest & 0x7f) | 0x80)
      rest >>>= 7
    }
    this.byte(rest)
  }

  /** Signed LEB128 of a 32-bit number. */
  signed(value: number): void {
    let rest = value | 0
    for (;;) {
      const low = rest & 0x7f
      rest >>= 7
      if ((rest === 0 && low < 0x40) || (rest === -1 && low >= 0x40)) {
        this.byte(low)
        return
      }
      this.byte(low | 0x80)
    }
  }

  /** Signed LEB128 of a 64-bit number, taken as two's complement. */
  signed64(value: bigint): void {
    let rest = BigInt.asIntN(64, value)
    if (rest >= -0x8000_0000n && rest <= 0x7fff_ffffn) {
      this.signed(Number(rest))
      return
    }
    for (;;) {
      const low = Number(rest & 0x7fn)
      rest >>= 7n
      if ((rest === 0n && low < 0x40) || (rest === -1n && low >= 0x40)) {
        this.byte(low)
        return
      }
      this.byte(low | 0x80)
    }
  }

  /** A name: its length in bytes, then ASCII. */
  name(text: string): void {
    this.unsigned(text.length)
    for (let at = 0; at < text.length; at++) this.byte(text.charCodeAt(at))
  }

  append(other: ByteWriter): void {
    if (this.used + other.used > this.bytes.length) this.grow(other.used)
    this.bytes.set(other.bytes.subarray(0, other.used), this.used)
    this.used += other.used
  }

  /** The bytes so far, as a copy. */
  toBytes(): Uint8Array<ArrayBuffer> {
    return this.bytes.slice(0, this.used)
  }

  private grow(least: number): void {
    const larger = new Uint8Array(Math.max(this.bytes.length * 2, this.used + least))
    larger.set(this.bytes)
    this.bytes = larger
  }
}
