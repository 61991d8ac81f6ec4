/** Powers of ten that a double holds exactly. */
const POWERS = Float64Array.from({ length: 23 }, (_, i) => Number(`1e${i}`));
/** Digits of a value: beyond any converter, short of the noise of the last bits. */
const DIGITS = 9;
const LEAST = 10 ** (DIGITS - 1);
const MOST = 10 ** DIGITS;
/** Bytes that one number takes at the most. */
const LONGEST = 32;
const [COMMA, LINE_END, MINUS, POINT, ZERO] = [44, 10, 45, 46, 48];

/** Rows of numbers as bytes of a CSV file; grows to what is written between two calls of `take`. */
export class NumberWriter {
  private bytes = new Uint8Array(1 << 16);
  private length = 0;

  /** A time in seconds to the nanosecond, without zeros at its end. */
  seconds(seconds: number): void {
    this.makeRoom();
    if (!(seconds >= 0 && seconds < MOST)) {
      this.text(String(Number(seconds.toFixed(9))));
      return;
    }
    const whole = Math.floor(seconds);
    const rest = Math.round((seconds - whole) * 1e9);
    this.decimal(rest === 1e9 ? whole + 1 : whole, rest === 1e9 ? 0 : rest, 9);
  }

  /** A comma and a value to nine significant digits, without zeros at its end. */
  value(value: number): void {
    this.makeRoom();
    this.bytes[this.length++] = COMMA;
    const magnitude = Math.abs(value);
    if (!(magnitude >= 1e-6 && magnitude < LEAST)) {
      this.text(String(Number(value.toPrecision(DIGITS))));
      return;
    }
    if (value < 0) this.bytes[this.length++] = MINUS;
    let decimals = DIGITS - 1;
    while (magnitude * POWERS[decimals] >= MOST) decimals--;
    while (magnitude * POWERS[decimals] < LEAST) decimals++;
    const digits = Math.round(magnitude * POWERS[decimals]);
    const whole = Math.floor(digits / POWERS[decimals]);
    this.decimal(whole, digits - whole * POWERS[decimals], decimals);
  }

  endLine(): void {
    this.bytes[this.length++] = LINE_END;
  }

  /** What was written since the last call; valid until the next number. */
  take(): Uint8Array {
    const taken = this.bytes.subarray(0, this.length);
    this.length = 0;
    return taken;
  }

  private decimal(whole: number, rest: number, decimals: number): void {
    let width = 1;
    while (POWERS[width] <= whole) width++;
    this.digits(whole, width);
    if (rest === 0) return;
    this.bytes[this.length++] = POINT;
    this.digits(rest, decimals);
    while (this.bytes[this.length - 1] === ZERO) this.length--;
  }

  /** A whole number under 2³¹, filled up with zeros in front. */
  private digits(number: number, width: number): void {
    const { bytes, length } = this;
    let left = number | 0;
    for (let i = length + width - 1; i >= length; i--) {
      const tenth = (left / 10) | 0;
      bytes[i] = ZERO + left - 10 * tenth;
      left = tenth;
    }
    this.length = length + width;
  }

  private text(text: string): void {
    for (let i = 0; i < text.length; i++) this.bytes[this.length++] = text.charCodeAt(i);
  }

  private makeRoom(): void {
    if (this.length + LONGEST <= this.bytes.length) return;
    const larger = new Uint8Array(2 * this.bytes.length);
    larger.set(this.bytes);
    this.bytes = larger;
  }
}
