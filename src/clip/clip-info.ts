/** A hole in the sequence of frames: the camera or the encoder left frames out. */
export interface FrameGap {
  /** Index of the last frame before the hole. */
  readonly afterFrame: number;
  /** Time from that frame to the next, s. */
  readonly intervalS: number;
  /** Frames missing, as the hole's length over the median interval suggests. */
  readonly missingFrames: number;
}

/** How evenly the frames follow each other. */
export interface FrameRegularity {
  /** Shortest time from one frame to the next, s; null for a clip of one frame. */
  readonly shortestIntervalS: number | null;
  /** Longest time from one frame to the next, s; null for a clip of one frame. */
  readonly longestIntervalS: number | null;
  /**
   * RMS distance of the timestamps from the evenly spaced lattice that fits them best, s; null below 3 frames.
   * A clip at a constant rate shows no more than the rounding of its clock.
   */
  readonly jitterRmsS: number | null;
  /** Rate of that lattice, frames per second of file time: finer than one interval can tell; null below 2 frames. */
  readonly latticeFps: number | null;
  /** True when intervals differ by more than the clock's rounding explains, holes left aside. */
  readonly variable: boolean;
}

/** What the clip says of its colours; null where it says nothing. */
export interface ClipColour {
  /** 'full' is 0 to 2^bits - 1, 'limited' is 16 to 235 in 8 bits. */
  readonly range: 'full' | 'limited' | null;
  /** Matrix, primaries and transfer as the decoder names them, such as 'bt709' or 'bt2020nc/bt2020/arib-std-b67'. */
  readonly spaces: string | null;
  /** High dynamic range transfer, if any: brightness is then far from linear, tracking still works. */
  readonly hdr: 'HLG' | 'PQ' | null;
}

/** What a clip is: everything the container and a pass over its packets tell without decoding a picture. */
export interface ClipInfo {
  /** Absolute path of the file. */
  readonly path: string;
  /** Size of the file, bytes. */
  readonly fileBytes: number;
  /** Container family; also the name of the only demuxer allowed to open the file. */
  readonly container: ClipContainer;
  /** Codec as the decoder names it: 'h264', 'hevc', 'vp9', 'av1', 'mjpeg', 'prores' ... */
  readonly codec: string;
  /** Pixel format as the decoder names it, such as 'yuv420p' or 'yuv420p10le'. */
  readonly pixelFormat: string;
  /** Bits of one brightness sample, 8 to 16. */
  readonly bitDepth: number;
  /** Columns of the picture as stored, px. */
  readonly codedWidth: number;
  /** Rows of the picture as stored, px. */
  readonly codedHeight: number;
  /** Columns as displayed: square pixels, turned upright, rounded. */
  readonly displayedWidth: number;
  /** Rows as displayed: square pixels, turned upright, rounded. */
  readonly displayedHeight: number;
  /** Clockwise turn that brings the stored picture upright, degrees. */
  readonly rotationDeg: RotationDeg;
  /** True where the picture, once upright, is to be shown mirrored left to right (some front cameras). */
  readonly mirrored: boolean;
  /** Width of a stored pixel over its height, exact as stored (4/3 for 4:3); 1 for square pixels. */
  readonly pixelAspect: number;
  /** Mean frame rate the demuxer states, frames per second of file time; null where it states none. */
  readonly nominalFps: number | null;
  /** One over the median interval between frames, frames per second of file time; null for a single frame. */
  readonly measuredFps: number | null;
  /** Number of frames displayed, which is the length of `timesS`. */
  readonly frameCount: number;
  /**
   * Time of each displayed frame in order of presentation, s of file time, the first frame being 0; edit lists
   * respected. Length = frameCount. For a slow-motion clip stored stretched, `trueTimes` undoes the stretch.
   */
  readonly timesS: Float64Array;
  /** The same instants in ticks of the file's clock, counted from `originTicks`. Length = frameCount. */
  readonly ticks: Float64Array;
  /** 1 for each frame that decodes without any other frame. Length = frameCount. */
  readonly keyFrames: Uint8Array;
  /** Most frames that are shown before, yet decoded after, one that they may be built on; 0 without B-frames. */
  readonly reorderDepth: number;
  /** One tick of the file's clock, s, as the fraction [numerator, denominator]. */
  readonly timeBase: readonly [number, number];
  /** Timestamp of the first displayed frame in the file, ticks. */
  readonly originTicks: number;
  /** From the first frame to the end of the last (its display time taken as the median interval), s of file time. */
  readonly durationS: number;
  /** Holes in the sequence, in order of time. */
  readonly gaps: readonly FrameGap[];
  /** Indices of frames that carry the same timestamp as the frame before them. */
  readonly duplicates: readonly number[];
  /** How evenly the frames follow each other. */
  readonly regularity: FrameRegularity;
  /** Rate at which the camera took the frames, where the file says it, frames per second of true time. */
  readonly captureFps: number | null;
  /** What the file says of its colours. */
  readonly colour: ClipColour;
  /** What the user should know of this clip, one sentence each. */
  readonly warnings: readonly string[];
}

/** Container families a clip may come in, by the name of the demuxer that reads them. */
export type ClipContainer = 'mov' | 'matroska' | 'avi' | 'mpegts';

/** Clockwise turn from the stored to the displayed picture, degrees. */
export type RotationDeg = 0 | 90 | 180 | 270;
