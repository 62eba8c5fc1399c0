import { useEffect, useState } from 'preact/hooks';
import { withUncertainty } from '../../../src/report/format-number.ts';
import type { ComparisonAnswer, TrendAnswer } from '../../shared/answers.ts';
import { PlotFigure } from '../resonance/PlotFigure.tsx';
import { ask, results, test } from '../state/bench.ts';
import { trendPlot } from './trend-plot.ts';

/** The configurations side by side, and what they give together. */
export function ComparePage() {
  const [answer, setAnswer] = useState<ComparisonAnswer | null>(null);
  const [now, sheets] = [results.value, test.value?.configurations];
  useEffect(() => {
    let current = true;
    void ask('compare', {}).then((next) => {
      if (current) setAnswer(next);
    });
    return () => {
      current = false;
    };
  }, [now, sheets]);
  const trends = answer?.trends ?? [];
  return (
    <div class="compare">
      <h1>Compare</h1>
      {(sheets?.length ?? 0) < 2 && (
        <p class="soft">
          There is one configuration only. Add another from the menu: other masses, springs or damper
          settings.
        </p>
      )}
      {answer && <Parameters answer={answer} />}
      <div class="plots">
        {trends.map((each) => (
          <Trend key={each.heading} trend={each} />
        ))}
      </div>
    </div>
  );
}

function Parameters({ answer }: { answer: ComparisonAnswer }) {
  const { configurations, parameters, notes } = answer.parameters;
  return (
    <>
      <table class="parameters">
        <caption class="unseen">Parameters of the configurations</caption>
        <thead>
          <tr>
            <th scope="col">configuration</th>
            {parameters.map(({ key, name, unit }) => (
              <th key={key} scope="col">
                {unit === '' ? name : `${name}, ${unit}`}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {configurations.map(({ id, label }, row) => (
            <tr key={id}>
              <th scope="row">{label}</th>
              {parameters.map(({ key, values }) => (
                <td key={key}>{withUncertainty(values[row]?.value ?? null, values[row]?.u ?? null)}</td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
      {parameters.flatMap(({ key, pairs }) =>
        pairs.map(({ from, to, sentence, significant }) => (
          <p key={`${key} ${from} ${to}`} class={significant ? '' : 'soft'}>
            {sentence}
          </p>
        )),
      )}
      {notes.map((note) => (
        <p key={note} class="soft">
          {note}
        </p>
      ))}
    </>
  );
}

function Trend({ trend }: { trend: TrendAnswer }) {
  return (
    <section>
      {trend.data && (
        <PlotFigure
          named={{
            name: trend.heading,
            heading: trend.heading,
            label: `${trend.heading}, with its trend`,
            plot: trendPlot(trend.data),
          }}
        />
      )}
      {trend.quantities.map(({ name, unit, of }) => (
        <p key={name}>
          {name} {withUncertainty(of.value, of.u)} {unit}
        </p>
      ))}
      {trend.notes.map((note) => (
        <p key={note} class="soft">
          {note}
        </p>
      ))}
    </section>
  );
}
