/** Reads bits from the most significant on; past the end there are zeros. */
export class Bits {
  private at = 0
  constructor(private readonly bytes: Uint8Array) {}

  /** `count` ≤ 32 */
  read(count: number): number {
    let value = 0
    for (let i = 0; i < count; i++, this.at++) value = value * 2 + ((this.bytes[this.at >> 3] ?? 0) >> (7 - this.at % 8) & 1)
    return value
  }

  skip(count: number): void {
    this.at += count
  }

  /** ue(v) of ITU-T H.265, 9.2; uvlc() of AV1, 4.10.3, is the same code. */
  exponential(): number {
    let zeros = 0
    while (zeros < 32 && this.read(1) === 0) zeros++
    return zeros === 32 ? 2 ** 32 - 1 : 2 ** zeros - 1 + this.read(zeros)
  }
}
