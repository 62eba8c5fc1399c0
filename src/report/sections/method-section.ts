import { type Html, html } from '../html.ts';
import type { ReportContext } from '../report-context.ts';

/** What of the method this test made use of. */
interface MethodFacts {
  readonly filmed: boolean;
  readonly typed: boolean;
  readonly lag: boolean;
  readonly ground: boolean;
  readonly exposure: boolean;
  readonly rowReadout: boolean;
  readonly slowMotion: boolean;
  readonly parallax: boolean;
  readonly plane: boolean;
  readonly joint: boolean;
  readonly ringdowns: boolean;
}

function factsOf({ test, measurement }: ReportContext): MethodFacts {
  const { dwells, ringdowns } = measurement.results;
  const scales = test.setups.flatMap((setup) => (setup.scale ? [setup.scale] : []));
  return {
    filmed: dwells.some((dwell) => dwell.clip !== null && !dwell.typed) || ringdowns.length > 0,
    typed: dwells.some((dwell) => dwell.typed),
    lag: dwells.some((dwell) => dwell.lag.value !== null),
    ground: test.setups.some((setup) => setup.markers.some((marker) => marker.role === 'ground')),
    exposure: test.clips.some((clip) => (clip.exposure ?? 0) > 0),
    rowReadout: test.clips.some((clip) => (clip.rowReadout ?? 0) > 0),
    slowMotion: test.clips.some((clip) => clip.captureFps !== undefined),
    parallax: scales.some((scale) => scale.cameraToScale !== undefined && scale.cameraToMotion !== undefined),
    plane: scales.some((scale) => (scale.plane?.length ?? 0) > 0),
    joint: dwells.some((dwell) => dwell.jointFit),
    ringdowns: ringdowns.length > 0,
  };
}

function filming(facts: MethodFacts): Html {
  return html`<p>The part is driven at one frequency at a time and filmed by a camera that stands still. Each frame counts at its own time stamp${facts.slowMotion ? ', with slow motion undone by the stated capture rate' : ''}. The response marker is followed from frame to frame by matching its patch of the picture to a fraction of a pixel; a frame in which it is not found is a gap and is never filled in.</p>
<p>Pixels become millimetres by two points on a rule in the picture, s = L / d, with L the true distance of the points and d their distance in pixels${facts.parallax ? '; rule and motion lie at different distances from the camera, so s is multiplied by (camera to motion) / (camera to rule)' : ''}${facts.plane ? '; where the view is oblique, points of known place in the plane of motion give the projection' : ''}.${facts.ground ? ' The motion of a ground marker is taken off, so that camera shake does not count.' : ''} Displacement x is counted along the motion axis.</p>`;
}

function sineFit(facts: MethodFacts): Html {
  return html`<p>In the steady window a sine at the drive frequency f is fitted by least squares:</p>
<p class="formula">x(t) = c + a cos 2πft + b sin 2πft, &nbsp; A = √(a² + b²)</p>
<p>The amplitude A is zero to peak of the fundamental.${facts.joint ? html` Where the start-up transient had not gone, a decaying sine is fitted together with the steady one, so that A is that of the steady motion alone.` : null}${facts.exposure ? html` Motion during the exposure time T<sub>e</sub> makes the amplitude look smaller by sin(πfT<sub>e</sub>) / (πfT<sub>e</sub>); this is corrected.` : null}${facts.rowReadout ? ' The rows of the sensor are read one after the other; each marker counts at the time of its row.' : null}${facts.lag ? ' The lag is the phase by which the response follows the drive marker in the same clip: for a drive X cos 2πft the response is A cos(2πft − lag).' : null}</p>`;
}

function resonanceFit(facts: MethodFacts): Html {
  return html`<p>The resonance of each configuration is that of a single-degree-of-freedom oscillator, fitted to the amplitudes${facts.lag ? ' and lags' : ''} of its dwells, each weighted by its own uncertainty; the formula stands with each configuration. With natural frequency f<sub>n</sub> and damping ratio ζ, r = f / f<sub>n</sub>, and</p>
<p class="formula">Q = 1 / (2ζ), &nbsp; bandwidth = f₂ − f₁ with |X(f₁)| = |X(f₂)| = |X|<sub>max</sub> / √2, &nbsp; k = m (2πf<sub>n</sub>)², &nbsp; c = 2ζ m · 2πf<sub>n</sub></p>
<p>The half-power points f₁ and f₂ are those of the fitted curve, without the approximation for small damping.${facts.ringdowns ? html` A ring-down is fitted as a decaying sine, exp(−2πζf<sub>n</sub>t) cos(2πf<sub>n</sub>√(1 − ζ²) t + φ).` : null}</p>`;
}

const UNCERTAINTY = html`<p>Uncertainties follow the Guide to the Expression of Uncertainty in Measurement (JCGM 100:2008). A standard uncertainty u combines independent sources, u² = Σ u<sub>i</sub>². The expanded uncertainty U = k u covers the value with a probability of about 95 %; k is Student's t for the effective degrees of freedom (Welch and Satterthwaite). What all dwells of a camera setup share, such as an error of the scale, is kept apart from what each dwell has of its own: it moves all amplitudes alike and leaves natural frequency and damping as they are, so that only the own part is used as weight in a fit.</p>`;

/** How the numbers came about, in plain words with the formulas; only what this test made use of. */
export function methodSection(context: ReportContext): Html {
  const facts = factsOf(context);
  const { unit } = context;
  return html`<h2>Method</h2>
${facts.filmed ? [filming(facts), sineFit(facts)] : null}
${facts.typed ? html`<p>Amplitudes marked “typed in” were not measured by this program; value and uncertainty are as stated by the operator.</p>` : null}
${resonanceFit(facts)}${UNCERTAINTY}
${unit.name === 'in' ? html`<p>Lengths are shown in inches, 1 in = 25.4 mm exactly. Measurement, files and the sentences of the program are in millimetres.</p>` : null}`;
}
