import fc from 'fast-check';

/** Trains of any angles for holding the phase graph against isochromats; times in ms, angles in degrees. */
export const randomTrain = fc.record({
  t1Ms: fc.double({ min: 200, max: 4500, noNaN: true }),
  t2Ms: fc.double({ min: 15, max: 2000, noNaN: true }),
  echoSpacingMs: fc.double({ min: 2, max: 20, noNaN: true }),
  refocusingDeg: fc.array(fc.double({ min: 0, max: 200, noNaN: true }), {
    minLength: 1,
    maxLength: 24,
  }),
  excitationDeg: fc.double({ min: 10, max: 120, noNaN: true }),
  b1Scale: fc.double({ min: 0.6, max: 1.3, noNaN: true }),
});
