import { RowWriter, SKIPPED, STAMP } from './row-writer.ts';
import type { Layout, RowBatch, RowLane } from './rows.ts';

/** Powers of ten that a double holds exactly. */
const POWERS = Float64Array.from({ length: 23 }, (_, i) => Number(`1e${i}`));
/** Decimal digits that a double's 53 bits always hold. */
const EXACT_DIGITS = 15;
const LONGEST_LINE = 1 << 24;

const [TAB, LF, CR, BLANK, QUOTE, HASH, PERCENT, PLUS, MINUS, SLASH] = [9, 10, 13, 32, 34, 35, 37, 43, 45, 47];

/** Thrown where a quote stands in the file: such a file needs the text lane. */
export class QuoteFound extends Error {}

/**
 * The lane for plain numbers: bytes to doubles without strings in between. Up to 15 digits are gathered in an integer, and one
 * exact power of ten multiplies or divides it, which IEEE 754 rounds correctly (Clinger 1990, "How to read floating point
 * numbers accurately", fast path); whatever else a field holds goes the way of text. Equals Number() to the last bit.
 */
export class NumberLane implements RowLane {
  private readonly writer: RowWriter;
  private readonly layout: Layout;
  private readonly decoder: TextDecoder;
  private readonly delimiter: number;
  private readonly decimal: number;
  private readonly lineEnd: number;
  private bytes = new Uint8Array(1 << 16);
  /** Bytes not yet read stand in [from, to); whole lines end at `whole`. */
  private from = 0;
  private to = 0;
  private whole = 0;
  private line = 1;
  private ended = false;
  private unterminated = false;
  /** Where the field read last ended. */
  private at = 0;

  constructor(layout: Layout, capacity: number) {
    const { delimiter, decimal, newline, encoding } = layout.dialect;
    this.layout = layout;
    this.writer = new RowWriter(layout, capacity);
    this.decoder = new TextDecoder(encoding === 'latin1' ? 'windows-1252' : 'utf-8');
    this.delimiter = delimiter.charCodeAt(0);
    this.decimal = decimal.charCodeAt(0);
    this.lineEnd = newline === '\r' ? CR : LF;
  }

  get faults() {
    return this.writer.faults;
  }

  feed(bytes: Uint8Array): void {
    const waiting = this.to - this.from;
    if (this.bytes.length < waiting + bytes.length + 1) {
      const larger = new Uint8Array(2 * (waiting + bytes.length + 1));
      larger.set(this.bytes.subarray(this.from, this.to));
      this.bytes = larger;
    } else this.bytes.copyWithin(0, this.from, this.to);
    this.bytes.set(bytes, waiting);
    this.from = 0;
    this.to = waiting + bytes.length;
    const end = bytes.lastIndexOf(this.lineEnd);
    this.whole = end < 0 ? 0 : waiting + end + 1;
    if (end < 0 && this.to > LONGEST_LINE) this.endLine();
  }

  finish(): void {
    this.unterminated = this.to > this.from;
    if (this.unterminated) this.endLine();
    this.ended = true;
  }

  next(): RowBatch | null {
    const { writer } = this;
    writer.begin();
    while (this.from < this.whole) {
      this.from = this.readLine(this.from);
      this.line++;
      if (writer.full) return writer.deliver();
    }
    if (!this.ended || writer.batch.length === 0) return null;
    this.ended = false;
    return writer.deliver();
  }

  private endLine(): void {
    this.bytes[this.to++] = this.lineEnd;
    this.whole = this.to;
  }

  /** Reads the line that starts at `start` into a row; gives the start of the next. */
  private readLine(start: number): number {
    const { writer, layout, line } = this;
    this.at = this.skipBlanks(start);
    if (line < layout.firstDataLine || this.isComment() || this.atLineEnd()) return this.skipLine(this.at);
    writer.open();
    const fields = this.readFields(writer.roles);
    const next = this.skipLine(this.at);
    const cutOff = this.unterminated && next === this.whole;
    writer.close(line, fields, cutOff, () => this.decoder.decode(this.bytes.subarray(start, next - 1)));
    return next;
  }

  private readFields(roles: Int32Array): number {
    const { delimiter, layout } = this;
    for (let field = 0; ; field++) {
      const role = field < roles.length ? roles[field] : SKIPPED;
      if (role >= 0) this.readValue(role, field);
      else if (role === STAMP) this.readStamp(field);
      else this.skipField();
      if (this.atLineEnd()) return field + 1;
      this.at++;
      if (delimiter !== BLANK && field + 1 !== layout.fields) continue;
      this.at = this.skipBlanks(this.at);
      if (this.atLineEnd()) return field + 1;
    }
  }

  /** Reads the field at `at` as a number into a value column. */
  private readValue(place: number, field: number): void {
    const { bytes, decimal, writer } = this;
    const start = this.at;
    let p = this.skipBlanks(start);
    const sign = bytes[p];
    if (sign === MINUS || sign === PLUS) p++;
    let mantissa = 0;
    const first = p;
    let digit = bytes[p] - 48;
    for (; digit >= 0 && digit <= 9; digit = bytes[++p] - 48) mantissa = mantissa * 10 + digit;
    let digits = p - first;
    let scale = 0;
    if (bytes[p] === decimal) {
      const point = ++p;
      digit = bytes[p] - 48;
      for (; digit >= 0 && digit <= 9; digit = bytes[++p] - 48) mantissa = mantissa * 10 + digit;
      scale = p - point;
      digits += scale;
    }
    if ((bytes[p] | 32) === 101 && digits > 0) {
      const negative = bytes[++p] === MINUS;
      if (negative || bytes[p] === PLUS) p++;
      const from = p;
      let exponent = 0;
      digit = bytes[p] - 48;
      for (; digit >= 0 && digit <= 9 && exponent < 1000; digit = bytes[++p] - 48) exponent = exponent * 10 + digit;
      if (p === from) digits = 0;
      scale -= negative ? -exponent : exponent;
    }
    if (bytes[p] === BLANK && this.delimiter !== BLANK) p = this.skipBlanks(p);
    if (digits === 0 || digits > EXACT_DIGITS || scale > 22 || scale < -22 || !this.endsField(p)) {
      this.readText(start, field);
      return;
    }
    const value = scale > 0 ? mantissa / POWERS[scale] : mantissa * POWERS[-scale];
    writer.batch.values[place][writer.batch.length] = sign === MINUS ? -value : value;
    this.at = p;
  }

  /** Reads the field at `at` as a time stamp: plain numbers of up to 15 digits on either side of the point here, the rest as text. */
  private readStamp(field: number): void {
    const { bytes, decimal, writer, layout } = this;
    const start = this.at;
    let p = this.skipBlanks(start);
    let whole = 0;
    let fraction = 0;
    const first = p;
    let digit = bytes[p] - 48;
    for (; digit >= 0 && digit <= 9; digit = bytes[++p] - 48) whole = whole * 10 + digit;
    const digits = p - first;
    let decimals = 0;
    if (bytes[p] === decimal) {
      const point = ++p;
      digit = bytes[p] - 48;
      for (; digit >= 0 && digit <= 9; digit = bytes[++p] - 48) fraction = fraction * 10 + digit;
      decimals = p - point;
    }
    const plain = layout.stampForm === 'number' && digits > 0 && digits <= EXACT_DIGITS && decimals <= EXACT_DIGITS;
    if (!plain || !this.endsField(p)) {
      this.readText(start, field);
      return;
    }
    writer.batch.stamps[writer.batch.length] = writer.stamps.relative(0, whole, fraction / POWERS[decimals]);
    this.at = p;
  }

  private readText(start: number, field: number): void {
    this.at = this.delimiter === BLANK ? this.skipBlanks(start) : start;
    const from = this.at;
    this.skipField();
    this.writer.put(this.line, field, this.decoder.decode(this.bytes.subarray(from, this.at)));
  }

  private skipField(): void {
    const { bytes } = this;
    let p = this.at;
    for (; !this.endsField(p); p++) if (bytes[p] === QUOTE) throw new QuoteFound();
    this.at = p;
  }

  private endsField(p: number): boolean {
    const byte = this.bytes[p];
    return (
      byte === this.delimiter || byte === this.lineEnd || byte === CR || (byte === TAB && this.delimiter === BLANK)
    );
  }

  private atLineEnd(): boolean {
    const byte = this.bytes[this.at];
    return byte === this.lineEnd || byte === CR;
  }

  private skipBlanks(p: number): number {
    const { bytes, delimiter } = this;
    let at = p;
    while (bytes[at] === BLANK || (bytes[at] === TAB && delimiter !== TAB)) at++;
    return at;
  }

  private skipLine(p: number): number {
    return this.bytes.indexOf(this.lineEnd, p) + 1;
  }

  private isComment(): boolean {
    const byte = this.bytes[this.at];
    return byte === HASH || byte === PERCENT || (byte === SLASH && this.bytes[this.at + 1] === SLASH);
  }
}
