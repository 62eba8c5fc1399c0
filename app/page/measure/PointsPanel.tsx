import { ROLE_COLOURS } from './draw-frame.ts';
import { spotSentences, spotTone } from './judgement-words.ts';
import { Loupe } from './Loupe.tsx';
import { asksNothing, judgements, points, pxPerMm, selectedPoint, tool } from './measure-state.ts';
import { removePoint } from './point-actions.ts';
import { type PlacedPoint, TOOLS, type Tool } from './points.ts';
import { ScaleLength } from './ScaleLength.tsx';
import { SetupFields } from './SetupFields.tsx';

/** What is placed on the picture of this camera setup, and what can be. */
export function PointsPanel() {
  const placed = points.value;
  const has = (what: Tool): boolean =>
    placed.some((each) => each.key === what || (what !== 'ground' && each.marker?.role === what));
  const offered = (Object.keys(TOOLS) as Tool[]).filter(
    (each) => !has(each) && (each !== 'axis-to' || has('axis-from')),
  );
  return (
    <section class="points" aria-labelledby="camera-setup">
      <Loupe />
      <div class="points-head">
        <h2 id="camera-setup">Camera setup</h2>
        <SetupFields />
      </div>
      <ul>
        {placed.map((point) => (
          <Point key={point.key} point={point} />
        ))}
      </ul>
      <ScaleLength />
      {pxPerMm.value !== null && <p class="soft">{pxPerMm.value.toPrecision(4)} px/mm</p>}
      <div class="tools">
        {offered.map((each) => (
          <button
            key={each}
            type="button"
            aria-pressed={tool.value === each}
            title={TOOLS[each].meaning}
            onClick={() => {
              tool.value = tool.value === each ? null : each;
              asksNothing.value = tool.value === null;
            }}
          >
            Place {TOOLS[each].name.toLowerCase().replace(/ ([ab])$/, (letter) => letter.toUpperCase())}
          </button>
        ))}
      </div>
    </section>
  );
}

function Point({ point }: { point: PlacedPoint }) {
  const selected = selectedPoint.value === point.key;
  const judgement = judgements.value.get(point.key);
  const role = point.marker?.role ?? (point.key.startsWith('scale') ? 'scale' : 'axis');
  return (
    <li>
      <button
        type="button"
        class="point"
        aria-pressed={selected}
        onClick={() => {
          selectedPoint.value = selected ? null : point.key;
          if (!selected) document.querySelector<HTMLElement>('[role=application]')?.focus();
        }}
      >
        <span class="swatch" style={{ background: ROLE_COLOURS[role] ?? '' }} />
        <b>{point.name}</b>
        <small>{point.meaning}</small>
      </button>
      {judgement && (
        <p class={`judgement ${spotTone(judgement)}`} role="status">
          {spotSentences(judgement).join(' ')}
        </p>
      )}
      {selected && (
        <div class="point-actions">
          {point.marker && (
            <button
              type="button"
              class="plain"
              onClick={() => {
                tool.value = point.marker?.role ?? null;
              }}
            >
              Place anew
            </button>
          )}
          <button type="button" class="plain" onClick={() => void removePoint(point.key)}>
            Remove
          </button>
        </div>
      )}
    </li>
  );
}
