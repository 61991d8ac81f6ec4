import Papa from 'papaparse';
import { RowWriter } from './row-writer.ts';
import type { Layout, RowBatch, RowLane } from './rows.ts';

const QUOTE = '"';
/** Characters behind which a quote that is still open is taken for a stray one. */
const LONGEST_RECORD = 1 << 20;
const COMMENT = /^\s*(?:#|%|\/\/)/;

/** Splits a piece of text that ends at a line end into records of fields; a delimiter of one blank stands for any run of blanks. */
export function splitFields(text: string, delimiter: string, newline: '\n' | '\r\n' | '\r'): string[][] {
  if (text === '') return [['']];
  if (delimiter !== ' ') return Papa.parse<string[]>(text, { delimiter, newline, quoteChar: QUOTE }).data;
  return text.split(newline).map((line) =>
    line
      .trim()
      .split(/\s+/)
      .map((field) => field.replace(/^"(.*)"$/, '$1')),
  );
}

/** True for a line that only comments, in its first field. */
export function isComment(firstField: string): boolean {
  return COMMENT.test(firstField);
}

/** The lane for everything with quotes: papaparse on pieces cut at line ends outside quotes. */
export class TextLane implements RowLane {
  private readonly writer: RowWriter;
  private readonly layout: Layout;
  private readonly decoder: TextDecoder;
  private readonly newline: '\n' | '\r';
  private rest = '';
  /** `rest` is scanned up to `seen`; whole records end at `cut`. */
  private seen = 0;
  private cut = 0;
  private quoted = false;
  private openedAt = 0;
  private records: string[][] = [];
  private nextRecord = 0;
  private line = 1;
  private ended = false;
  private terminated = true;

  constructor(layout: Layout, capacity: number) {
    this.layout = layout;
    this.writer = new RowWriter(layout, capacity);
    const { encoding, newline } = layout.dialect;
    this.decoder = new TextDecoder(encoding === 'latin1' ? 'windows-1252' : 'utf-8');
    this.newline = newline === '\r' ? '\r' : '\n';
  }

  get faults() {
    return this.writer.faults;
  }

  feed(bytes: Uint8Array): void {
    this.rest += this.decoder.decode(bytes, { stream: true });
  }

  finish(): void {
    this.rest += this.decoder.decode();
    this.terminated = this.rest === '' || this.rest.endsWith(this.newline);
    if (!this.terminated) this.rest += this.newline;
    this.ended = true;
  }

  next(): RowBatch | null {
    const { writer } = this;
    writer.begin();
    for (;;) {
      while (this.nextRecord < this.records.length) {
        this.row(this.records[this.nextRecord++]);
        if (writer.full) return writer.deliver();
      }
      this.scan();
      if (this.cut === 0) break;
      this.split();
    }
    if (!this.ended || writer.batch.length === 0) return null;
    this.ended = false;
    return writer.deliver();
  }

  /** Looks for the last line end outside quotes. A quote open for too long ends the piece, so that only what it spoilt is lost. */
  private scan(): void {
    while (this.seen < this.rest.length) {
      const sign = this.rest[this.seen];
      if (sign === QUOTE) {
        this.quoted = !this.quoted && this.mayOpen();
        this.openedAt = this.seen;
      }
      this.seen++;
      if (sign !== this.newline) continue;
      const stray = this.quoted && this.seen - this.openedAt > LONGEST_RECORD;
      if (stray) this.quoted = false;
      if (!this.quoted) this.cut = this.seen;
      if (stray) return;
    }
    if (this.ended) this.cut = this.rest.length;
  }

  /** A quote opens a field at its start only, or again behind the one that closed it: a doubled quote within. */
  private mayOpen(): boolean {
    const before = this.seen === 0 ? this.newline : this.rest[this.seen - 1];
    return before === this.newline || before === this.layout.dialect.delimiter || before === QUOTE;
  }

  private split(): void {
    const piece = this.rest.slice(0, this.cut - 1);
    this.rest = this.rest.slice(this.cut);
    this.seen -= this.cut;
    this.openedAt -= this.cut;
    this.cut = 0;
    this.records = splitFields(piece, this.layout.dialect.delimiter, this.newline);
    this.nextRecord = 0;
  }

  private row(fields: string[]): void {
    const { writer, layout, line } = this;
    this.line += 1 + fields.reduce((ends, field) => ends + field.split(this.newline).length - 1, 0);
    if (line < layout.firstDataLine || isComment(fields[0])) return;
    if (fields.length === 1 && fields[0].trim() === '') return;
    writer.open();
    fields.forEach((text, field) => {
      writer.put(line, field, text);
    });
    const extra = fields.length === layout.fields + 1 && fields[layout.fields].trim() === '' ? 1 : 0;
    const last = this.ended && !this.terminated && this.nextRecord === this.records.length && this.rest === '';
    writer.close(line, fields.length - extra, last, () => fields.join(layout.dialect.delimiter));
  }
}
