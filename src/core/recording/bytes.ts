import type { ByteSource, Dialect } from './recording.ts';

/** The first bytes of a source, at the most `limit`, and whether that is all of it. */
export async function readHead(source: ByteSource, limit: number): Promise<{ bytes: Uint8Array; whole: boolean }> {
  const head = new Uint8Array(limit);
  let length = 0;
  for await (const chunk of source.chunks()) {
    const taken = chunk.subarray(0, limit - length);
    head.set(taken, length);
    length += taken.length;
    if (taken.length < chunk.length) return { bytes: head.subarray(0, length), whole: false };
  }
  return { bytes: head.subarray(0, length), whole: true };
}

/** All bytes of a source in an encoding that keeps ASCII as it is: UTF-16 becomes UTF-8, all else passes through. */
export async function* asciiChunks(
  source: ByteSource,
  encoding: Dialect['encoding'],
  onProgress?: (bytesRead: number) => void,
): AsyncGenerator<Uint8Array> {
  const decoder = encoding.startsWith('utf-16') ? new TextDecoder(encoding) : null;
  const encoder = new TextEncoder();
  let bytesRead = 0;
  for await (const chunk of source.chunks()) {
    yield decoder ? encoder.encode(decoder.decode(chunk, { stream: true })) : chunk;
    bytesRead += chunk.length;
    onProgress?.(bytesRead);
  }
  if (decoder) yield encoder.encode(decoder.decode());
}
