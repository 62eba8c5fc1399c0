import { describe, expect, it } from 'vitest';
import { cameraAdvice, type MotionToShow } from '../../src/plan/camera-advice.ts';
import { chooseFrameRate, framesSentence, samplingTrouble } from '../../src/plan/frame-rate.ts';
import { chooseShutter, exposureLoss, smearPx } from '../../src/plan/shutter-advice.ts';

describe('frame rate', () => {
  it('the slowest that shows ten frames a period, else the fastest', () => {
    expect(chooseFrameRate(2).frameRateHz).toBe(30);
    expect(chooseFrameRate(5).frameRateHz).toBe(60);
    expect(chooseFrameRate(47.5)).toMatchObject({ frameRateHz: 240, sentence: null });
    expect(chooseFrameRate(20, [30, 60]).sentence).toMatch(/3\.0 frames a period: amplitudes are right/);
    expect(framesSentence(30, 35)).toMatch(/still measures, because the drive frequency is known/);
  });

  it('trouble where a drive frequency meets the frame rate or its fractions; 47.5 Hz at 60/s is clear (alias 12.5)', () => {
    expect(samplingTrouble(60, 60, 5)).toMatch(/same one or two phases/); // the part seems to stand
    expect(samplingTrouble(30, 60, 5)).toMatch(/same one or two phases/);
    expect(samplingTrouble(20.05, 60, 5)).toMatch(/second harmonic/); // 2 f folds to 60 - 40.1 = 19.9 Hz
    expect(samplingTrouble(15, 60, 5)).toMatch(/third harmonic/);
    expect(samplingTrouble(47.5, 60, 5)).toBeNull();
    expect(samplingTrouble(4.873, 60, 5)).toBeNull();
  });

  it('a longer clip tells apart what a short one cannot', () => {
    expect(samplingTrouble(20.05, 60, 5)).not.toBeNull();
    expect(samplingTrouble(20.05, 60, 30)).toBeNull(); // 19.9 and 20.05 Hz differ by 0.15, more than 1/30
  });
});

describe('shutter', () => {
  it('exposure loss: 10 Hz at 1/60 s 4.507 %, at 1/120 s 1.138 %; 20 Hz at 1/60 s 17.301 % (sinc)', () => {
    expect(exposureLoss(10, 1 / 60)).toBeCloseTo(1 - 0.954929659, 9);
    expect(exposureLoss(10, 1 / 120)).toBeCloseTo(1 - 0.988615929, 9);
    expect(exposureLoss(20, 1 / 60)).toBeCloseTo(1 - 0.826993343, 9);
  });

  it('smear is the way through the middle during the exposure, at most the whole swing', () => {
    const exposureS = 1 / 200;
    const half = Math.PI * 5 * exposureS;
    expect(smearPx(5, 100, exposureS)).toBeCloseTo(100 * (Math.sin(half) - Math.sin(-half)), 9);
    expect(smearPx(5, 100, 1)).toBe(200);
  });

  it('the longest exposure that loses 1 % and smears 6 px at most', () => {
    const shutter = { highestHz: 5, fastestHz: 5, amplitudePx: 100, frameRateHz: 60, exposureS: null };
    const { exposureS } = chooseShutter(shutter);
    expect(exposureS).toBe(1 / 1000);
    expect(smearPx(5, 100, 1 / 500)).toBeGreaterThan(6);
    expect(smearPx(5, 100, exposureS)).toBeLessThan(6);
    const slow = chooseShutter({ ...shutter, exposureS: 1 / 60 });
    expect(slow.exposureS).toBe(1 / 60);
    expect(slow.sentence).toMatch(/1\/60 s smears the marker over up to 52 px .* 1\/1000 s would do/);
    expect(chooseShutter({ ...shutter, exposureS: 1 / 1000 }).sentence).toBeNull();
  });
});

describe('scale and place of the camera', () => {
  const motion: MotionToShow = { highestHz: 5.5, fastestHz: 5, smallestMm: 2, largestMm: 40 };

  it('stays a metre away where the smallest swing allows it, and says how true the plane must be', () => {
    const advice = cameraAdvice({ ...motion, smallestMm: 5 }, { viewAngleDeg: 60 });
    expect(advice.distanceMm).toBeCloseTo(1000, 6);
    expect(advice.fieldLengthMm).toBeCloseTo(2 * 1000 * Math.tan(Math.PI / 6), 6);
    expect(advice.sentences.join(' ')).toMatch(/rule must lie within 2 mm of the plane/);
  });

  it('comes closer for a small swing, but never so close that the largest leaves the frame', () => {
    expect(cameraAdvice(motion, {}).pxPerMm).toBeCloseTo(2.5, 12); // 5 px for 2 mm
    const crowded = cameraAdvice({ ...motion, smallestMm: 0.05 }, { frameLengthPx: 1920 });
    expect(crowded.pxPerMm! * 2 * 40).toBeCloseTo(0.7 * 1920, 9);
  });

  it('below half a pixel it says codec-limited (phone codecs hide such motion)', () => {
    const sentences = cameraAdvice({ ...motion, smallestMm: 0.1 }, { pxPerMm: 2 }).sentences.join(' ');
    expect(sentences).toMatch(/smallest swing is 0\.20 px.*codec-limited/);
    expect(cameraAdvice(motion, { pxPerMm: 2 }).sentences.join(' ')).not.toMatch(/codec/);
  });

  it('a given view that is too close or too far is told', () => {
    expect(cameraAdvice(motion, { pxPerMm: 40 }).sentences.join(' ')).toMatch(/does not fit the frame/);
    expect(cameraAdvice(motion, { pxPerMm: 1 }).sentences.join(' ')).toMatch(/fills only 4 % of the frame/);
  });

  it('without a size of the motion scale and distance are null, not guessed', () => {
    const advice = cameraAdvice({ ...motion, smallestMm: null, largestMm: null }, {});
    expect([advice.pxPerMm, advice.fieldLengthMm, advice.distanceMm]).toEqual([null, null, null]);
    expect(advice.sentences.join(' ')).toMatch(/size of the motion is not known/);
  });
});
