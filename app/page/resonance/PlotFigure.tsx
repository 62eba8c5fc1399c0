import { useRef } from 'preact/hooks';
import { PlotView } from '../charts/PlotView.tsx';
import { test } from '../state/bench.ts';
import { configuration } from '../state/view.ts';
import type { NamedPlot } from './plots.ts';
import { plotAsCsv, saveFile, savePng } from './save-plot.ts';

/** A plot under its heading, saved as picture or as data. */
export function PlotFigure({ named }: { named: NamedPlot }) {
  const place = useRef<HTMLElement>(null);
  const stem = [test.value?.title, configuration.value?.label ?? configuration.value?.id, named.name]
    .join(' ')
    .replace(/[^\p{L}\p{N} ._-]+/gu, ' ');
  return (
    <figure ref={place}>
      <figcaption>
        <h2>{named.heading}</h2>
        <button
          type="button"
          class="plain"
          aria-label={`Save ${named.heading} as PNG`}
          onClick={() => {
            const canvas = place.current?.querySelector('canvas');
            if (canvas) savePng(`${stem}.png`, canvas);
          }}
        >
          PNG
        </button>
        <button
          type="button"
          class="plain"
          aria-label={`Save the data of ${named.heading} as CSV`}
          onClick={() => saveFile(`${stem}.csv`, new Blob([plotAsCsv(named.plot)], { type: 'text/csv' }))}
        >
          CSV
        </button>
      </figcaption>
      <div class="plot">
        <PlotView plot={named.plot} label={named.label} />
      </div>
    </figure>
  );
}
