import type { ClipInfo } from '../clip/clip-info.ts';
import { toCoded } from '../clip/coordinates.ts';
import { InputError } from '../errors.ts';
import type { MarkerSpec, Setup } from '../testfile/schema.ts';
import { chooseTemplate, type JudgeOptions } from '../track/judge-spot.ts';
import type { LumaImage } from '../track/luma-image.ts';

import type { SpotJudgement, Template } from '../track/template.ts';
import type { TrackRole } from './clip-tracks.ts';
import { type DecodeContext, frameLuma } from './frame-luma.ts';

/** A marker ready to be followed through any clip of its camera setup. */
export interface PreparedMarker {
  readonly id: string;
  readonly role: TrackRole;
  readonly template: Template;
  readonly judgement: SpotJudgement;
  /** Clip and frame in which it was marked, and the marked point in coded pixels. */
  readonly clip: string;
  readonly frame: number;
  readonly at: { readonly x: number; readonly y: number };
}

/** Markers of a setup: those that can be followed, and for the others why not. */
export interface PreparedSetup {
  readonly markers: readonly PreparedMarker[];
  readonly refused: ReadonlyMap<string, string>;
  /** What may still go wrong with a marker, one sentence each, by the clip it was marked in. */
  readonly cautions: ReadonlyMap<string, readonly string[]>;
  /** Size of the picture they were marked in, coded pixels; null where none could be prepared. */
  readonly picture: { readonly codedWidth: number; readonly codedHeight: number } | null;
}

/** Gives the facts of a clip of the setup by its id. */
export type ClipLookup = (clipId: string) => Promise<ClipInfo>;

const STILL_ID = 'still patch';
const SCALE_REACH_PX = 30; // a rule has ticks and figures within this distance of the point that was clicked

function odd(size: number): number {
  const whole = Math.round(size);
  return whole % 2 === 1 ? whole : whole + 1;
}

function judgeOptions(spec: MarkerSpec): JudgeOptions {
  return spec.size ? { sizePx: odd(Math.max(spec.size[0], spec.size[1])) } : {};
}

/** A patch on the rule, which is at rest: what moves there is the camera or the codec. */
function stillPatch(setup: Setup, clip: string, info: ClipInfo, image: LumaImage): PreparedMarker | null {
  const scale = setup.scale;
  if (!scale) return null;
  const offsets = [0, SCALE_REACH_PX, -SCALE_REACH_PX];
  for (const [x, y] of [scale.from, scale.to]) {
    for (const dx of offsets) {
      const at = toCoded({ x: x + dx, y }, info);
      if (at.x < 0 || at.y < 0 || at.x >= info.codedWidth || at.y >= info.codedHeight) continue;
      const { template, judgement } = chooseTemplate(image, at.x, at.y, { travelPx: 0 });
      if (template) return { id: STILL_ID, role: 'still', template, judgement, clip, frame: 0, at };
    }
  }
  return null;
}

/**
 * Cuts the templates of a setup's markers out of the frames they were marked in. Where the setup has no ground marker, a
 * still patch on the rule joins them as a control.
 * @param firstClip the clip a marker was marked in where it names none
 */
export async function prepareMarkers(
  setup: Setup,
  firstClip: string,
  lookup: ClipLookup,
  context: DecodeContext,
): Promise<PreparedSetup> {
  const markers: PreparedMarker[] = [];
  const refused = new Map<string, string>();
  const cautions = new Map<string, string[]>();
  const frames = new Map<string, LumaImage>();
  let picture: PreparedSetup['picture'] = null;

  const imageOf = async (clip: string, frame: number): Promise<{ info: ClipInfo; image: LumaImage }> => {
    const info = await lookup(clip);
    const key = `${clip}\n${frame}`;
    const image = frames.get(key) ?? (await frameLuma(info, frame, context));
    frames.set(key, image);
    return { info, image };
  };

  for (const spec of setup.markers) {
    const clip = spec.clip ?? firstClip;
    const frame = spec.frame ?? 0;
    try {
      const { info, image } = await imageOf(clip, frame);
      const [x, y] = spec.at;
      if (x < -0.5 || y < -0.5 || x > info.displayedWidth - 0.5 || y > info.displayedHeight - 0.5) {
        throw new InputError(
          `marker "${spec.id}" at (${x}, ${y}) lies outside the frame of ${info.displayedWidth} x ${info.displayedHeight} px; mark it again.`,
        );
      }
      const at = toCoded({ x, y }, info);
      const { template, judgement } = chooseTemplate(image, at.x, at.y, judgeOptions(spec));
      if (!template)
        throw new InputError(`marker "${spec.id}": ${judgement.reason ?? 'the spot cannot be tracked'}`);
      const said = judgement.warnings.map((warning) => `marker "${spec.id}": ${warning}`);
      cautions.set(clip, [...(cautions.get(clip) ?? []), ...said]);
      picture ??= { codedWidth: info.codedWidth, codedHeight: info.codedHeight };
      markers.push({ id: spec.id, role: spec.role, template, judgement, clip, frame, at });
    } catch (error) {
      if (!(error instanceof InputError)) throw error;
      refused.set(spec.id, error.message);
    }
  }
  if (markers.length > 0 && !markers.some((marker) => marker.role === 'ground')) {
    const { info, image } = await imageOf(firstClip, 0);
    const still = stillPatch(setup, firstClip, info, image);
    if (still) markers.push(still);
  }
  return { markers, refused, cautions, picture };
}
