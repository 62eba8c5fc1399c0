import { open, stat } from 'node:fs/promises';
import { InputError } from '../errors.ts';
import type { ClipContainer } from './clip-info.ts';

/** Bytes looked at: enough to see the regular beat of a transport stream. */
const SNIFFED_BYTES = 4096;
/** Boxes an ISO or QuickTime movie may begin with. */
const MOVIE_BOXES = new Set(['ftyp', 'moov', 'mdat', 'wide', 'free', 'skip', 'pnot', 'styp', 'moof', 'uuid']);
/** Packets of a transport stream that must all carry the sync byte for it to be believed. */
const SYNC_PACKETS = 4;
const SYNC_BYTE = 0x47;

/** A clip's file before anything is known of its content. */
export interface SniffedFile {
  readonly container: ClipContainer;
  readonly fileBytes: number;
}

/**
 * Looks at a file's first bytes and says which container it is, so that only that demuxer is ever let at it: a
 * playlist, a list of files or a picture pattern named .mp4 ends here. Throws InputError for what is missing,
 * unreadable, no regular file, empty, or none of the containers a clip may come in.
 */
export async function sniffContainer(path: string): Promise<SniffedFile> {
  const { start, fileBytes } = await readStart(path);
  if (fileBytes === 0) throw new InputError(`${path} is empty; copy the clip anew from the camera.`);
  const container = containerOf(start);
  if (container === null) {
    throw new InputError(
      `${path} is ${kindOf(start)}, not a clip; give a video file (MP4, MOV, 3GP, Matroska, WebM, AVI or MPEG-TS).`,
    );
  }
  return { container, fileBytes };
}

async function readStart(path: string): Promise<{ start: Buffer; fileBytes: number }> {
  try {
    // Not opened before it is known to be a file: opening a named pipe would wait for a writer.
    const about = await stat(path);
    if (about.isDirectory()) throw new InputError(`${path} is a folder; give a video file.`);
    if (!about.isFile()) throw new InputError(`${path} is not a regular file; give a video file.`);
    const file = await open(path, 'r');
    try {
      const start = Buffer.alloc(SNIFFED_BYTES);
      const { bytesRead } = await file.read(start, 0, SNIFFED_BYTES, 0);
      return { start: start.subarray(0, bytesRead), fileBytes: about.size };
    } finally {
      await file.close();
    }
  } catch (error) {
    if (error instanceof InputError) throw error;
    const { code } = error as NodeJS.ErrnoException;
    if (code === 'ENOENT' || code === 'ENOTDIR')
      throw new InputError(`${path} does not exist; check the path.`);
    if (code === 'EACCES' || code === 'EPERM') {
      throw new InputError(`${path} may not be read; check its permissions.`);
    }
    throw new InputError(`${path} cannot be read (${code ?? String(error)}); copy the clip to a local disk.`);
  }
}

/** Container by the first bytes of a file; null for anything else. */
export function containerOf(start: Buffer): ClipContainer | null {
  const text = (from: number, to: number): string => start.toString('latin1', from, to);
  if (start.length >= 12 && MOVIE_BOXES.has(text(4, 8)) && start.readUInt32BE(0) !== 2) return 'mov';
  if (text(0, 4) === '\x1a\x45\xdf\xa3') return 'matroska';
  if (text(0, 4) === 'RIFF' && text(8, 12) === 'AVI ') return 'avi';
  if (beats(start, 0, 188) || beats(start, 4, 192)) return 'mpegts';
  return null;
}

function beats(start: Buffer, offset: number, packetBytes: number): boolean {
  for (let i = 0; i < SYNC_PACKETS; i++) {
    if (start[offset + i * packetBytes] !== SYNC_BYTE) return false;
  }
  return true;
}

/** What a file that is not a clip seems to be, for the message. */
function kindOf(start: Buffer): string {
  const text = start.toString('latin1');
  if (/^(\xef\xbb\xbf)?\s*#EXTM3U/.test(text)) return 'a playlist';
  if (/^(\xef\xbb\xbf)?\s*(ffconcat|file\s)/.test(text)) return 'a list of files';
  if (text.startsWith('\xff\xd8\xff') || text.startsWith('\x89PNG')) return 'a still picture';
  if (text.startsWith('ID3') || (text.startsWith('RIFF') && text.slice(8, 12) === 'WAVE'))
    return 'a sound file';
  const printable = start.every((b) => b >= 32 || b === 9 || b === 10 || b === 13);
  return printable ? 'a text file' : 'a file without the beginning of a video';
}
