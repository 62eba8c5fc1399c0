import { useEffect, useRef } from 'preact/hooks';
import { theme } from '../chrome/looks.ts';
import { preferences } from '../state/bench.ts';
import { type DrawnPlot, drawPlot, type Plot } from './chart.ts';

/** A plot in the page; `label` says in words what it shows. */
export function PlotView({ plot, label }: { plot: Plot; label: string }) {
  const canvas = useRef<HTMLCanvasElement>(null);
  const drawn = useRef<DrawnPlot | null>(null);
  const looks = `${theme.value} ${preferences.value?.textPercent}`;
  useEffect(() => {
    if (!canvas.current) return;
    if (drawn.current) drawn.current.update(plot);
    else drawn.current = drawPlot(canvas.current, plot);
  }, [plot, looks]);
  useEffect(
    () => () => {
      drawn.current?.destroy();
      drawn.current = null;
    },
    [],
  );
  return <canvas ref={canvas} role="img" aria-label={label} onDblClick={() => drawn.current?.resetZoom()} />;
}
