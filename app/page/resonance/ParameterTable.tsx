import type { ResonanceResult } from '../../../src/engine/results.ts';
import { decimalsFor, significant, withUncertainty } from '../../../src/report/format-number.ts';
import { amplitudeUnit } from '../format/amplitude.ts';
import { quantitiesOf } from './quantities.ts';

const PARAMETERS = ['static response', 'natural frequency', 'damping'] as const;

/** What the fit gives, with standard uncertainties, intervals and correlation. */
export function ParameterTable({ fit }: { fit: ResonanceResult }) {
  return (
    <>
      <table class="parameters">
        <caption class="unseen">Parameters of the fit</caption>
        <thead>
          <tr>
            <th scope="col">quantity</th>
            <th scope="col">value ± u</th>
            <th scope="col">unit</th>
            <th scope="col">interval, 95 %</th>
          </tr>
        </thead>
        <tbody>
          {quantitiesOf(fit, amplitudeUnit.value).map(({ name, unit, of, interval }) => (
            <tr key={name}>
              <th scope="row">{name}</th>
              <td>{withUncertainty(of.value, of.u)}</td>
              <td>{unit}</td>
              <td>{interval ? interval.map((each) => endText(each, of.u)).join(' to ') : ''}</td>
            </tr>
          ))}
        </tbody>
      </table>
      {fit.correlation && fit.correlation.length > 0 && (
        <table class="parameters">
          <caption>Correlation</caption>
          <thead>
            <tr>
              <th />
              {PARAMETERS.map((each) => (
                <th key={each} scope="col">
                  {each}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {fit.correlation.map((row, i) => (
              <tr key={PARAMETERS[i]}>
                <th scope="row">{PARAMETERS[i]}</th>
                {row.map((each, j) => (
                  <td key={PARAMETERS[j]}>{each.toFixed(2)}</td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      )}
    </>
  );
}

/** An end of an interval, rounded as the uncertainty asks; an end that is not known is open. */
function endText(end: number | null, u: number | null): string {
  if (end === null) return 'open';
  return u === null ? significant(end, 5) : end.toFixed(decimalsFor(u));
}
