/**
 * Whole numbers as bytes: unsigned varints (seven bits a byte, lowest first) and zigzag for signed ones. Counted in
 * floating point where 32 bits do not suffice, so exact up to 2^53.
 */
export class ByteWriter {
  private bytes = new Uint8Array(4096)
  private length = 0

  byte(value: number): void {
    if (this.length === this.bytes.length) this.grow()
    this.bytes[this.length++] = value
  }

  unsigned(value: number): void {
    let rest = value
    while (rest >= 0x80000000) {
      this.byte((rest % 128) + 128)
      rest = Math.floor(rest / 128)
    }
    while (rest >= 128) {
      this.byte((rest & 127) | 128)
      rest >>>= 7
    }
    this.byte(rest)
  }

  signed(value: number): void {
    this.unsigned(value >= 0 ? 2 * value : -2 * value - 1)
  }

  float64(value: number): void {
    const view = new DataView(new ArrayBuffer(8))
    view.setFloat64(0, value, true)
    for (let n = 0; n < 8; n++) this.byte(view.getUint8(n))
  }

  text(value: string): void {
    this.unsigned(value.length)
    for (let n = 0; n < value.length; n++) this.unsigned(value.charCodeAt(n))
  }

  /** A copy of what was written. */
  finish(): Uint8Array {
    return this.bytes.slice(0, this.length)
  }

  private grow(): void {
    const larger = new Uint8Array(this.bytes.length * 2)
    larger.set(this.bytes)
    this.bytes = larger
  }
}

/** The inverse. Throws RangeError where the bytes end too early. */
export class ByteReader {
  private position = 0

  constructor(private readonly bytes: Uint8Array) {}

  byte(): number {
    const value = this.bytes[this.position++]
    if (value === undefined) throw new RangeError('packed readings end too early')
    return value
  }

  unsigned(): number {
    let value = 0
    let scale = 1
    for (;;) {
      const byte = this.byte()
      value += (byte & 127) * scale
      if (byte < 128) return value
      scale *= 128
      if (scale > 2 ** 49) throw new RangeError('a packed number is too long')
    }
  }

  signed(): number {
    const value = this.unsigned()
    return value % 2 === 0 ? value / 2 : -(value + 1) / 2
  }

  /**
   * Fills in, from signed differences, the values that are not NaN; the first difference is to zero. The same as
   * `signed` for each, written out because all readings pass through here.
   */
  running(values: Float64Array): void {
    const { bytes } = this
    let before = 0
    for (let n = 0; n < values.length; n++) {
      if (Number.isNaN(values[n])) continue
      const first = bytes[this.position] ?? 128
      const second = bytes[this.position + 1] ?? 128
      if (first < 128) {
        this.position += 1
        before += first & 1 ? -(first + 1) / 2 : first / 2
      } else if (second < 128) {
        this.position += 2
        const zigzag = (first & 127) | (second << 7)
        before += zigzag & 1 ? -(zigzag + 1) / 2 : zigzag / 2
      } else before += this.signed()
      values[n] = before
    }
  }

  float64(): number {
    const view = new DataView(new ArrayBuffer(8))
    for (let n = 0; n < 8; n++) view.setUint8(n, this.byte())
    return view.getFloat64(0, true)
  }

  text(): string {
    const length = this.unsigned()
    let value = ''
    for (let n = 0; n < length; n++) value += String.fromCharCode(this.unsigned())
    return value
  }

  get atEnd(): boolean {
    return this.position === this.bytes.length
  }
}
