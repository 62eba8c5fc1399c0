import { mkdtemp, rm } from 'node:fs/promises';
import { connect, createServer, type Socket } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

/** Bytes read at once at most. */
const READ_BYTES = 1 << 20;
/** Longest address of a local socket that every system takes whole, bytes; a longer one is silently cut. */
const LONGEST_ADDRESS = 100;

/** A way for a child process to send us bytes, made before the child is started. */
export interface OutputChannel {
  /** To be given to the child as its standard output. */
  readonly childEnd: Socket;
  /** To be called once the child has been started (or could not be): our copy of its end must not keep it open. */
  readonly handedOver: () => void;
  /** Settles when the child has closed its end and everything has been read, or after `letGo`. */
  readonly ended: Promise<void>;
  /** Stops reading and closes our end. */
  readonly letGo: () => void;
}

/**
 * Opens a channel that reads into one buffer again and again, which takes a fifth of the processor time of a child's
 * ordinary standard output, where Node makes a new buffer for every 64 KB. It is a local socket whose address exists
 * only until both ends are connected, in a folder nobody else may enter. `onChunk` is called synchronously; its
 * bytes are overwritten afterwards. Null where the system does not offer this (Windows, or a too long address): then
 * the ordinary standard output serves.
 */
export async function openOutputChannel(onChunk: (chunk: Uint8Array) => void): Promise<OutputChannel | null> {
  if (process.platform === 'win32') return null;
  let folder: string | null = null;
  try {
    folder = await mkdtemp(join(tmpdir(), 'dwellbook-'));
    const address = join(folder, 's');
    if (Buffer.byteLength(address) > LONGEST_ADDRESS) return null;
    return await connectEnds(address, onChunk);
  } catch {
    return null;
  } finally {
    if (folder !== null) await rm(folder, { recursive: true, force: true });
  }
}

function connectEnds(address: string, onChunk: (chunk: Uint8Array) => void): Promise<OutputChannel> {
  return new Promise((resolve, reject) => {
    const server = createServer({ pauseOnConnect: true });
    server.once('error', reject);
    server.maxConnections = 1;
    server.listen(address, () => {
      const ourEnd = connect({
        path: address,
        onread: {
          buffer: Buffer.allocUnsafeSlow(READ_BYTES),
          callback: (count, buffer) => {
            onChunk(buffer.subarray(0, count));
            return true;
          },
        },
      });
      ourEnd.once('error', reject);
      const ended = new Promise<void>((settle) => ourEnd.once('close', () => settle()));
      server.once('connection', (childEnd) => {
        server.close();
        childEnd.on('error', () => {}); // the child's affair from here on
        const handedOver = (): void => {
          childEnd.destroy();
        };
        const letGo = (): void => {
          ourEnd.destroy();
        };
        resolve({ childEnd, handedOver, ended, letGo });
      });
    });
  });
}
