import { useSignalEffect } from '@preact/signals';
import { useRef } from 'preact/hooks';
import { theme } from '../chrome/looks.ts';
import { armedTool, clipView, points, selectedPoint } from './measure-state.ts';
import { hand, loaded } from './stage-state.ts';

const WIDTH = 180;
const HEIGHT = 120;
const ZOOM = 6;

/** The surroundings of the selected point (the response marker where none is), or of the hand while something is to be placed, six times enlarged. */
export function Loupe() {
  const canvas = useRef<HTMLCanvasElement>(null);
  useSignalEffect(() => {
    void theme.value;
    const context = canvas.current?.getContext('2d');
    const [picture, shown] = [clipView.value, loaded.value];
    if (!canvas.current || !context) return;
    const ratio = window.devicePixelRatio || 1;
    canvas.current.width = WIDTH * ratio;
    canvas.current.height = HEIGHT * ratio;
    context.setTransform(ratio, 0, 0, ratio, 0, 0);
    const at = looksAt();
    if (!picture || !shown || !at) return;
    context.imageSmoothingEnabled = false;
    const [x, y] = at;
    context.drawImage(
      shown.bitmap,
      WIDTH / 2 - (x + 0.5) * ZOOM,
      HEIGHT / 2 - (y + 0.5) * ZOOM,
      picture.width * ZOOM,
      picture.height * ZOOM,
    );
    for (const [colour, width] of [
      ['#000a', 3],
      ['#56b4e9', 1.2],
    ] as const) {
      context.strokeStyle = colour;
      context.lineWidth = width;
      context.beginPath();
      context.moveTo(WIDTH / 2, HEIGHT / 2 - 22);
      context.lineTo(WIDTH / 2, HEIGHT / 2 + 22);
      context.moveTo(WIDTH / 2 - 22, HEIGHT / 2);
      context.lineTo(WIDTH / 2 + 22, HEIGHT / 2);
      context.stroke();
    }
  });
  const at = looksAt();
  return (
    <div class="loupe" aria-hidden={at === null}>
      <canvas
        ref={canvas}
        style={{ width: `${WIDTH}px`, height: `${HEIGHT}px` }}
        role="img"
        aria-label="Loupe"
      />
      <p>
        {at ? `x ${at[0].toFixed(1)} px, y ${at[1].toFixed(1)} px` : 'Select a point to see it enlarged.'}
      </p>
    </div>
  );
}

function looksAt(): readonly [number, number] | null {
  if (armedTool.value && hand.value) return hand.value;
  const shown =
    points.value.find((each) => each.key === selectedPoint.value) ??
    points.value.find((each) => each.marker?.role === 'response');
  return shown?.at ?? null;
}
