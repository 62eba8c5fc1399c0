const STEP_S = 0.1;
const SHORTEST_S = 0.2;

/** One end of the steady window: dragged, or moved by arrow keys. */
export function WindowHandle(props: {
  side: 0 | 1;
  window: readonly [number, number];
  limits: readonly [number, number];
  /** Column of the end, px. */
  x: number;
  toTime: (x: number) => number;
  onMove: (window: readonly [number, number], done: boolean) => void;
}) {
  const { side, window: ends, limits, onMove } = props;
  const moved = (timeS: number): readonly [number, number] =>
    side === 0
      ? [Math.min(ends[1] - SHORTEST_S, Math.max(limits[0], timeS)), ends[1]]
      : [ends[0], Math.max(ends[0] + SHORTEST_S, Math.min(limits[1], timeS))];
  const drag = (event: PointerEvent): void => {
    const handle = event.currentTarget as HTMLElement;
    const left = handle.parentElement?.getBoundingClientRect().left ?? 0;
    handle.setPointerCapture(event.pointerId);
    const move = (next: PointerEvent): void => onMove(moved(props.toTime(next.clientX - left)), false);
    const up = (next: PointerEvent): void => {
      handle.removeEventListener('pointermove', move);
      onMove(moved(props.toTime(next.clientX - left)), true);
    };
    handle.addEventListener('pointermove', move);
    handle.addEventListener('pointerup', up, { once: true });
  };
  return (
    <div
      class="window-handle"
      role="slider"
      tabIndex={0}
      aria-label={side === 0 ? 'Start of the steady window' : 'End of the steady window'}
      aria-valuemin={limits[0]}
      aria-valuemax={limits[1]}
      aria-valuenow={ends[side]}
      aria-valuetext={`${ends[side].toFixed(2)} s`}
      style={{ left: `${props.x}px` }}
      onPointerDown={drag}
      onKeyDown={(event) => {
        const by = { ArrowLeft: -1, ArrowRight: 1 }[event.key];
        if (by === undefined) return;
        event.preventDefault();
        onMove(moved(ends[side] + by * STEP_S * (event.shiftKey ? 10 : 1)), true);
      }}
    />
  );
}
