import { amplitudeUnit } from '../format/amplitude.ts';
import { shownCurve, shownFit, shownPoints } from '../response/response-state.ts';
import { configuration, selectDwell } from '../state/view.ts';
import { ModelChoice } from './ModelChoice.tsx';
import { ParameterTable } from './ParameterTable.tsx';
import { PlotFigure } from './PlotFigure.tsx';
import { resonancePlots } from './plots.ts';

/** The fit of a configuration: model, plots, parameters, and what to mind. */
export function ResonancePage() {
  const [points, fit, curve] = [shownPoints.value, shownFit.value, shownCurve.value];
  const excluded = configuration.value?.dwells.filter((each) => each.excluded !== undefined) ?? [];
  const plots = resonancePlots({
    ...{ points, fit, curve, unit: amplitudeUnit.value, bandK: 2 },
    onDwell: selectDwell,
  });
  return (
    <div class="resonance">
      <header>
        <h1>{configuration.value?.label ?? configuration.value?.id}</h1>
        <ModelChoice />
      </header>
      {fit && <p class="soft">{fit.error ?? `${fit.formula} · ${fit.quantity}, ${fit.points} dwells`}</p>}
      {points.length === 0 ? (
        <p class="soft">No dwell of this configuration has an amplitude yet.</p>
      ) : (
        <div class="resonance-body">
          <div class="plots">
            {plots.map((each) => (
              <PlotFigure key={each.name} named={each} />
            ))}
          </div>
          <div class="numbers">
            {fit && !fit.error && <ParameterTable fit={fit} />}
            {fit && fit.chi2 !== null && fit.dof !== null && (
              <p class="soft">
                Chi-squared {fit.chi2.toPrecision(3)} with {fit.dof} degrees of freedom.
              </p>
            )}
            {fit?.warnings.map((each) => (
              <p key={each} class="wait">
                {each}
              </p>
            ))}
            {fit?.notes.map((each) => (
              <p key={each} class="soft">
                {each}
              </p>
            ))}
            {excluded.length > 0 && (
              <section aria-labelledby="excluded">
                <h2 id="excluded">Excluded</h2>
                <ul>
                  {excluded.map((each) => (
                    <li key={each.id}>
                      {each.driveHz === undefined ? each.id : `${each.driveHz} Hz`}: {each.excluded}
                    </li>
                  ))}
                </ul>
              </section>
            )}
          </div>
        </div>
      )}
    </div>
  );
}
