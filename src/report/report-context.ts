import type { EvaluatedClips } from '../engine/evaluate-clips.ts';
import type { Measurement } from '../engine/measure-test.ts';
import type { ReportSpec, TestFile } from '../testfile/schema.ts';
import type { ConfigurationView } from './configuration-view.ts';
import type { ChartPainter } from './draw-chart.ts';
import type { PictureOutcome } from './frame-pictures.ts';
import type { LengthUnit } from './length-unit.ts';
import type { Reproduction } from './reproduction.ts';

/** What every section of a report is written from. */
export interface ReportContext {
  readonly test: TestFile;
  readonly measurement: Measurement;
  /** The user's own words. */
  readonly words: ReportSpec;
  readonly views: readonly ConfigurationView[];
  /** Motion along the axis for each clip that could be judged. */
  readonly evaluated: EvaluatedClips;
  readonly unit: LengthUnit;
  /** null where nothing can draw: the report is then made without plots. */
  readonly painter: ChartPainter | null;
  readonly pictures: readonly PictureOutcome[];
  readonly reproduction: Reproduction;
  /** Day on which the report was made, as printed; null where not to be printed. */
  readonly madeOn: string | null;
}
