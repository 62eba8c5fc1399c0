import type { Measured } from '../../../src/numeric/measured.ts';
import { withUncertainty } from '../../../src/report/format-number.ts';
import { PlotView } from '../charts/PlotView.tsx';
import { amplitudeUnit } from '../format/amplitude.ts';
import { selectDwell } from '../state/view.ts';
import { NextDwell, shownPlan } from './NextDwell.tsx';
import { amplitudePlot } from './response-plot.ts';
import { shownCurve, shownFit, shownPoints } from './response-state.ts';

/** Amplitude against drive frequency, growing as rows fill, with the fit and its three numbers. */
export function ResponseCard() {
  const [points, fit, curve] = [shownPoints.value, shownFit.value, shownCurve.value];
  const plot = amplitudePlot({
    ...{ points, fit, curve, unit: amplitudeUnit.value, bandK: 2, small: true },
    nextHz: shownPlan()?.next?.driveHz ?? null,
    onDwell: selectDwell,
  });
  return (
    <section class="card" aria-labelledby="response">
      <h2 id="response">Response</h2>
      {points.length === 0 ? (
        <p class="soft">Grows here as dwells are measured or typed.</p>
      ) : (
        <>
          <div class="plot">
            <PlotView plot={plot} label={`Amplitude against drive frequency, ${points.length} dwells`} />
          </div>
          {fit?.error ? (
            <p class="soft">{fit.error}</p>
          ) : (
            fit && (
              <div class="fit">
                <Quantity name="natural frequency" of={fit.naturalHz} unit="Hz" />
                <Quantity name="damping ratio" of={fit.dampingRatio} unit="" />
                <Quantity name="Q" of={fit.q} unit="" />
              </div>
            )
          )}
        </>
      )}
      <NextDwell />
    </section>
  );
}

function Quantity({ name, of, unit }: { name: string; of: Measured; unit: string }) {
  return (
    <div>
      <small>{name}</small>
      {withUncertainty(of.value, of.u)} {unit}
    </div>
  );
}
