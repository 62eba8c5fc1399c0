import type { EvaluatedClip } from '../../engine/evaluate-clips.ts';
import { modelText } from '../../resonance/model-text.ts';
import type { Setup } from '../../testfile/schema.ts';
import { significant, withUncertainty } from '../format-number.ts';
import { type AxisDirection, frameOverlay } from '../frame-overlay.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { factTable, htmlTable } from '../html-table.ts';
import type { ReportContext } from '../report-context.ts';
import { seenDirection } from '../seen-direction.ts';

function scaleFacts(setup: Setup, clip: EvaluatedClip | undefined): [HtmlValue, HtmlValue][] {
  const { scale } = setup;
  if (!scale) return [['Scale', 'not marked']];
  const distancePx = Math.hypot(scale.to[0] - scale.from[0], scale.to[1] - scale.from[1]);
  const length = `${withUncertainty(scale.length, scale.lengthU ?? null)} mm (k = 1) over ${significant(distancePx, 5)} px`;
  const toMm = clip?.geometry.toMm;
  const found: [HtmlValue, HtmlValue][] = [['Scale', length]];
  if (toMm?.kind === 'uniform')
    found.push(['Scale in the plane of motion', `${significant(toMm.mmPerPx, 5)} mm per px`]);
  if (scale.plane && scale.plane.length > 0)
    found.push([
      'Plane of motion',
      `${scale.plane.length} points marked; the view is oblique and is corrected for`,
    ]);
  if (scale.cameraToScale !== undefined && scale.cameraToMotion !== undefined)
    found.push(['Camera to rule, to motion', `${scale.cameraToScale} mm, ${scale.cameraToMotion} mm`]);
  return found;
}

function axisFact(setup: Setup, clip: EvaluatedClip | undefined): string {
  if (setup.motionAxis !== undefined && setup.motionAxis !== 'auto') return 'marked by hand';
  if (!clip) return 'to be found from the motion';
  const { angleDeg, uAngleDeg } = clip.axis;
  return `found from the motion, ${withUncertainty(angleDeg, uAngleDeg)}° from the horizontal${clip.geometry.toMm.kind === 'plane' ? ' of the plane' : ', positive downward'} (k = 1)`;
}

function setupPart(setup: Setup, context: ReportContext): Html {
  const clip = [...context.evaluated.clips.values()].find((each) => each.spec.setup === setup.id);
  const picture = context.pictures.find((each) => each.setup === setup.id);
  const direction: AxisDirection | null = clip ? seenDirection(clip) : null;
  const markers = setup.markers.map((marker) => `${marker.id} (${marker.role})`).join(', ');
  return html`<h3>Camera setup ${setup.id}</h3>
${picture === undefined ? null : 'reason' in picture ? html`<p class="notice">${picture.reason}</p>` : html`<figure>${frameOverlay(picture, setup, direction, context.unit)}<figcaption>Frame ${picture.frame} of clip ${picture.clip}, with the scale points (white), the motion axis (dashed) and the markers.</figcaption></figure>`}
${factTable([
  ...scaleFacts(setup, clip),
  ['Motion axis', axisFact(setup, clip)],
  ['Markers', markers === '' ? 'none' : markers],
])}`;
}

function configurationRows({ views, unit }: ReportContext): HtmlValue[][] {
  return views.map(({ name, configuration }) => [
    name,
    modelText({ excitation: configuration.excitation, damping: configuration.damping ?? 'viscous' }),
    configuration.movingMass === undefined
      ? '–'
      : withUncertainty(configuration.movingMass, configuration.movingMassU ?? null),
    configuration.travelLimit === undefined
      ? 'not stated'
      : significant(configuration.travelLimit * unit.perMm, 3),
    configuration.setting ?? '–',
  ]);
}

/** What was tested and how it was filmed. */
export function setupSection(context: ReportContext): Html {
  const { test, unit } = context;
  return html`<h2>Object and set-up</h2>
${
  test.configurations.length === 0
    ? html`<p>The test has no configurations yet.</p>`
    : htmlTable(
        [
          { title: 'configuration' },
          { title: 'excitation and damping' },
          { title: html`moving mass<br>kg ± u`, kind: 'number' },
          { title: html`travel limit<br>${unit.name}`, kind: 'number' },
          { title: 'setting', kind: 'number' },
        ],
        configurationRows(context),
      )
}
${test.setups.length === 0 && test.clips.length === 0 ? html`<p>Nothing was filmed: all amplitudes were typed in.</p>` : null}
${test.setups.map((setup) => setupPart(setup, context))}`;
}
