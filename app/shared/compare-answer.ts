import type { Results } from '../../src/engine/results.ts';
import { compareConfigurations } from '../../src/report/comparison.ts';
import { massTrendData, quantityTrendData } from '../../src/report/comparison-data.ts';
import { viewConfiguration } from '../../src/report/configuration-view.ts';
import type { TestFile } from '../../src/testfile/schema.ts';
import type { ComparisonAnswer, TrendAnswer } from './answers.ts';

/** Compares the configurations of a test, as data that can be sent. */
export function compareAnswer(test: TestFile, results: Results): ComparisonAnswer {
  const { parameters, masses, settings } = compareConfigurations(
    test.configurations.map((each) => viewConfiguration(each, results)),
  );
  const trends: TrendAnswer[] = masses.map((each) => {
    const { comparison, reason } = each.outcome;
    return {
      heading: 'Natural frequency against mass',
      data: massTrendData(each),
      quantities: comparison
        ? [
            { name: 'stiffness', unit: 'N/m', of: comparison.stiffnessNPerM },
            { name: 'effective mass beside those added', unit: 'kg', of: comparison.effectiveMassKg },
          ]
        : [],
      notes: comparison?.notes ?? (reason === null ? [] : [reason]),
    };
  });
  for (const each of settings) {
    const { result, reason } = each.outcome;
    trends.push({
      heading: `${each.quantity} against setting`,
      data: quantityTrendData(each),
      quantities: result
        ? [{ name: 'change per unit of the setting', unit: each.unit, of: result.slopeAtCentre }]
        : [],
      notes: result?.notes ?? (reason === null ? [] : [reason]),
    });
  }
  return { parameters, trends };
}
