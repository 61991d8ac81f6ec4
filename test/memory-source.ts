import { createHash } from 'node:crypto';
import type { ByteSource } from '../src/core/recording/recording.ts';

/** A source over text or bytes in memory, delivered in chunks of `chunkBytes` out of one buffer that is used again, as a file's are. */
export function memorySource(content: string | Uint8Array, chunkBytes = 65_536, name = 'made.csv'): ByteSource {
  const bytes = typeof content === 'string' ? new TextEncoder().encode(content) : content;
  return {
    name,
    sizeBytes: bytes.length,
    async *chunks() {
      const buffer = new Uint8Array(chunkBytes);
      for (let from = 0; from < bytes.length; from += chunkBytes) {
        const piece = bytes.subarray(from, from + chunkBytes);
        buffer.set(piece);
        yield buffer.subarray(0, piece.length);
      }
    },
    sha256: async () => createHash('sha256').update(bytes).digest('hex'),
  };
}
