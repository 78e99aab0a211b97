import { ProblemError } from '../shared/index.js';
import type { EchoTrain } from './epg.js';

/** @throws ProblemError naming the first thing in a train that cannot be */
export function checkTrain(train: EchoTrain): void {
  checkAboveZero('T1', train.t1Ms, 'ms');
  checkAboveZero('T2', train.t2Ms, 'ms');
  checkAboveZero('echo spacing', train.echoSpacingMs, 'ms');
  checkAboveZero('B1 scale', train.b1Scale ?? 1, 'times');
  checkAngle('excitation flip angle', train.excitationDeg ?? 90);
  if (train.refocusingDeg.length === 0) {
    throw new ProblemError({
      code: 'train-value',
      thing: 'refocusing angles',
      value: 'none',
      limit: 'one angle per echo, at least one',
      wayOut: 'Give an angle for every echo.',
    });
  }
  train.refocusingDeg.forEach((deg, n) => checkAngle(`refocusing flip angle ${n + 1}`, deg));
}

/** @throws ProblemError unless the value is a finite number above zero */
export function checkAboveZero(thing: string, value: number, unit: string): void {
  if (Number.isFinite(value) && value > 0) return;
  throw new ProblemError({
    code: 'train-value',
    thing,
    value: `${value} ${unit}`,
    limit: 'must be a number above 0',
    wayOut: `Give the ${thing} in ${unit}.`,
  });
}

/** @throws ProblemError unless the angle is within 0..360 degrees */
export function checkAngle(thing: string, deg: number): void {
  if (Number.isFinite(deg) && deg >= 0 && deg <= 360) return;
  throw new ProblemError({
    code: 'train-value',
    thing,
    value: `${deg} degrees`,
    limit: 'must lie within 0 to 360 degrees',
    wayOut: `Give the ${thing} in degrees.`,
  });
}
