/** Bytes that can be read from the start any number of times: a file, a dropped File, a string in a test. */
export interface ByteSource {
  /** Name shown to people. */
  readonly name: string;
  /** Size in bytes, where it is known before reading. */
  readonly sizeBytes?: number;
  /** All bytes from the start, in pieces of any size. */
  chunks(): AsyncIterable<Uint8Array>;
  /** SHA-256 of all the bytes, lower-case hexadecimal; called after the first full read. */
  sha256(): Promise<string>;
}

/** What the caller may fix instead of leaving it to be found. */
export interface ReadingOptions {
  /** Sampling rate, Hz, for logs without a time column; overrules the time column where both are there. */
  readonly rateHz?: number;
  /** Rows a block holds at the most; changes no result. Default 65,536. */
  readonly blockRows?: number;
  /** Bytes of decoded numbers kept for the next pass; a longer recording is read again. Default 96 MiB. */
  readonly memoryBytes?: number;
  /** Called now and then with the bytes read so far in this pass. */
  readonly onProgress?: (bytesRead: number) => void;
}

/** How the text is laid out. */
export interface Dialect {
  readonly encoding: 'utf-8' | 'utf-16le' | 'utf-16be' | 'latin1';
  readonly delimiter: string;
  readonly decimal: '.' | ',';
  readonly newline: '\n' | '\r\n' | '\r';
  /** Lines before the header: comments, key and value, empty. */
  readonly preambleLines: number;
  /** 1-based line of the header; null where there is none. */
  readonly headerLine: number | null;
  /** 1-based line of a row of units; null where there is none. */
  readonly unitsLine: number | null;
}

/** What the time column holds. */
export type TimeKind = 's' | 'ms' | 'us' | 'ns' | 'min' | 'epoch' | 'iso8601' | 'clock' | 'counter' | 'none';

/** One numeric channel. */
export interface Channel {
  readonly name: string;
  /** Unit as written in the file; '' where none is given. */
  readonly unit: string;
  /** 1-based column in the file. */
  readonly column: number;
}

/** A step of the time base over 1.5 periods. */
export interface Gap {
  /** 1-based line of the file of the first row behind the gap. */
  readonly row: number;
  /** Time at which the gap starts, seconds from the first sample. */
  readonly atSeconds: number;
  readonly lengthSeconds: number;
}

/** Something found while reading that a user may want to know. */
export interface Note {
  readonly severity: 'note' | 'warning';
  /** One clear sentence with its figure and its place. */
  readonly text: string;
}

/** Everything known of a recording after the first pass; plain data. */
export interface RecordingFacts {
  readonly file: string;
  readonly sizeBytes: number;
  readonly sha256: string;
  /** Data rows read. */
  readonly rows: number;
  readonly dialect: Dialect;
  readonly timeKind: TimeKind;
  /** Name of the time column; null where there is none. */
  readonly timeName: string | null;
  /** Rate of the uniform grid that `blocks()` delivers, Hz. */
  readonly rateHz: number;
  /** Standard deviation of the residual of the straight-line fit of stamps on row numbers over the longest run, seconds. */
  readonly jitterSeconds: number;
  /** Resolution of the stamps, seconds; it makes q/√12 of the jitter. 0 where there are none. */
  readonly stampResolutionSeconds: number;
  /** True where the stamps were uneven beyond 1 % of a period, so that `blocks()` interpolates. */
  readonly resampled: boolean;
  readonly durationSeconds: number;
  /** Samples in the longest run, on the uniform grid. */
  readonly longestRunSamples: number;
  readonly gaps: readonly Gap[];
  readonly channels: readonly Channel[];
  /** Columns left out and why (text, constant, empty). */
  readonly leftOut: readonly { readonly name: string; readonly column: number; readonly why: string }[];
  readonly notes: readonly Note[];
}

/** Consecutive samples of one run on a uniform grid: what every fold downstream takes. Runs never share a block. */
export interface UniformBlock {
  /** Number of the run, from 0. */
  readonly run: number;
  /** Index within the run of this block's first sample; 0 starts a run. */
  readonly firstSample: number;
  /** Time of the first sample, seconds from the first sample of the recording. */
  readonly startSeconds: number;
  /** Samples in this block. */
  readonly length: number;
  /** One array per channel of `facts.channels`, each `length` long, finite throughout. Owned by the reader: copy what is to be kept. */
  readonly channels: readonly Float64Array[];
  /**
   * The rows as they were logged since the block before, one array per channel: the very arrays of `channels` but where samples were
   * interpolated. Rows behind the last sample of an interpolated run are in no block.
   */
  readonly rows: readonly Float64Array[];
}

/** A recording that has been surveyed once and can be replayed as often as needed. */
export interface Recording {
  readonly facts: RecordingFacts;
  blocks(): AsyncIterable<UniformBlock>;
}
