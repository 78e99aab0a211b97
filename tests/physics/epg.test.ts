import { describe, expect, it } from 'vitest';
import { echoAmplitudes } from '../../src/physics/index.js';
import { ProblemError } from '../../src/shared/index.js';

const never = 1e15;
const constant = (deg: number, count: number) => Array.from({ length: count }, () => deg);
const lossless = (refocusingDeg: readonly number[]) =>
  Array.from(echoAmplitudes({ t1Ms: never, t2Ms: never, echoSpacingMs: 10, refocusingDeg }));

describe('echo amplitudes without relaxation', () => {
  // Derived three ways in the checks, section 2 (leading coefficients are the Catalan numbers).
  it.each([30, 60, 90, 120, 150, 170, 180])(
    'closed forms in q = sin^2(a/2) hold at %d degrees',
    (deg) => {
      const q = Math.sin((deg * Math.PI) / 360) ** 2;
      const closed = [
        q,
        2 * q - q ** 2,
        3 * q - 4 * q ** 2 + 2 * q ** 3,
        4 * q - 10 * q ** 2 + 12 * q ** 3 - 5 * q ** 4,
        5 * q - 20 * q ** 2 + 42 * q ** 3 - 40 * q ** 4 + 14 * q ** 5,
        6 * q - 35 * q ** 2 + 112 * q ** 3 - 180 * q ** 4 + 140 * q ** 5 - 42 * q ** 6,
      ];
      const echoes = lossless(constant(deg, 6));
      closed.forEach((value, n) => expect(echoes[n]).toBeCloseTo(value, 10));
    },
  );

  // Table of the checks, section 2; printed to five places.
  it.each([
    [
      150,
      [
        0.93301, 0.99551, 0.94139, 0.98435, 0.95391, 0.97198, 0.96479, 0.96361, 0.9701, 0.96137,
        0.96971, 0.96362,
      ],
    ],
    [
      120,
      [
        0.75,
        0.9375,
        0.84375,
        219 / 256,
        453 / 512,
        1755 / 2048,
        0.86206,
        0.87529,
        0.86085,
        0.86386,
        0.87176,
        0.86259,
      ],
    ],
    [
      90,
      [
        0.5,
        0.75,
        0.75,
        0.6875,
        0.6875,
        23 / 32,
        0.71875,
        0.69922,
        0.69922,
        0.71289,
        0.71289,
        0.70264,
      ],
    ],
    [
      60,
      [
        0.25,
        0.4375,
        17 / 32,
        139 / 256,
        263 / 512,
        995 / 2048,
        0.48071,
        0.49394,
        0.50838,
        0.5114,
        0.5035,
        0.49433,
      ],
    ],
    [
      30,
      [
        0.06699, 0.12949, 0.18361, 0.22658, 0.25703, 0.2751, 0.28228, 0.28111, 0.27462, 0.26589,
        0.25755, 0.25146,
      ],
    ],
    // Of the eight values printed for 170 the last is named as the eighth echo.
    [170, [0.9924, 0.99994, 0.99252, 0.99977, 0.99274, 0.9995, 0.99306, 0.99914]],
  ])('the published-checks table holds at %d degrees', (deg, row) => {
    const echoes = lossless(constant(deg, 12));
    row.forEach((value, n) => expect(Math.abs((echoes[n] ?? 0) - value)).toBeLessThan(6e-6));
  });

  it('a first angle halfway to 180 steadies the train', () => {
    const echoes = lossless([150, ...constant(120, 11)]);
    const row = [
      0.93301, 0.91627, 0.94139, 0.91941, 0.9304, 0.93079, 0.9247, 0.92962, 0.9293, 0.92624,
      0.92916, 0.92882,
    ];
    row.forEach((value, n) => expect(Math.abs((echoes[n] ?? 0) - value)).toBeLessThan(6e-6));
  });

  it.each([
    [150, 0.96593],
    [120, 0.86603],
    [90, 0.70711],
    [60, 0.5],
    [30, 0.25882],
  ])('settles at sin(a/2): %d degrees at %d', (deg, level) => {
    // Derived, checks section 2. Echoes swing about it ever less: a long mean, within 1e-4.
    const tail = lossless(constant(deg, 800)).slice(400);
    expect(Math.abs(tail.reduce((a, b) => a + b, 0) / 400 - level)).toBeLessThan(1e-4);
  });

  it('the mean of echoes 101 to 200 at 120 degrees is .866027', () => {
    const tail = lossless(constant(120, 200)).slice(100);
    expect(tail.reduce((a, b) => a + b, 0) / 100).toBeCloseTo(0.866027, 6);
  });

  it.each([
    [150, 0.98274],
    [120, 0.9294],
    [90, 0.83463],
    [60, 0.68644],
    [30, 0.45609],
  ])('a slow ramp from 180 to %d degrees keeps the most there is, %d', (deg, most) => {
    // Pseudo steady state (Alsop 1997): (2/pi) sin(a/2) K(cos^2(a/2)), derived, checks section 2. The ramp
    // is slow, so that it is followed all the way; smooth at its start and its end.
    const ramp = Array.from({ length: 600 }, (_, n) => {
      const done = (1 - Math.cos((Math.PI * n) / 600)) / 2;
      return 180 - (180 - deg) * done;
    });
    const last = lossless([...ramp, ...constant(deg, 20)]).slice(-20);
    expect(Math.abs(last.reduce((a, b) => a + b, 0) / 20 - most)).toBeLessThan(1e-4);
    // The formula itself, by the arithmetic-geometric mean.
    let [x, y] = [1, Math.sin((deg * Math.PI) / 360)];
    for (let n = 0; n < 8; n++) [x, y] = [(x + y) / 2, Math.sqrt(x * y)];
    expect(Math.sin((deg * Math.PI) / 360) / x).toBeCloseTo(most, 4);
  });

  it('equals an integral over isochromats for any echo number', () => {
    // Independent oracle of the checks: mean over theta of ny2 + (1 - ny2) cos(n phi).
    const alpha = (100 * Math.PI) / 180;
    const q = Math.sin(alpha / 2) ** 2;
    const echoes = lossless(constant(100, 40));
    const points = 20_000;
    for (const n of [1, 7, 19, 40]) {
      let sum = 0;
      for (let i = 0; i < points; i++) {
        const theta = (2 * Math.PI * (i + 0.5)) / points;
        const ny2 = q / (q + (1 - q) * Math.sin(theta) ** 2);
        const phi = 2 * Math.acos(Math.cos(alpha / 2) * Math.cos(theta));
        sum += ny2 + (1 - ny2) * Math.cos(n * phi);
      }
      expect(echoes[n - 1]).toBeCloseTo(sum / points, 7);
    }
  });
});

describe('echo amplitudes with relaxation', () => {
  it('perfect 180s decay with T2 alone', () => {
    const echoes = echoAmplitudes({
      t1Ms: 1084,
      t2Ms: 69,
      echoSpacingMs: 10,
      refocusingDeg: constant(180, 64),
    });
    echoes.forEach((e, n) => expect(e).toBeCloseTo(Math.exp((-(n + 1) * 10) / 69), 12));
  });

  // Rows of the checks, section 2.
  it.each([
    [
      120,
      1084,
      69,
      10,
      [
        0.64881, 0.74239, 0.56133, 0.52291, 0.46112, 0.40544, 0.34509, 0.32504, 0.26564, 0.24848,
        0.21005, 0.19282,
      ],
    ],
    [
      180,
      1084,
      69,
      10,
      [
        0.86508, 0.74837, 0.64741, 0.56006, 0.4845, 0.41913, 0.36259, 0.31367, 0.27135, 0.23474,
        0.20307, 0.17567,
      ],
    ],
    [
      120,
      809,
      34,
      5,
      [
        0.64743, 0.74089, 0.55825, 0.52033, 0.45744, 0.4023, 0.34118, 0.32182, 0.26176, 0.24537,
        0.20644, 0.18993,
      ],
    ],
  ])('%d degrees, T1 %d, T2 %d, spacing %d', (deg, t1Ms, t2Ms, echoSpacingMs, row) => {
    const echoes = echoAmplitudes({ t1Ms, t2Ms, echoSpacingMs, refocusingDeg: constant(deg, 12) });
    row.forEach((value, n) => expect(Math.abs((echoes[n] ?? 0) - value)).toBeLessThan(6e-6));
  });

  it('long train, spacing 4: echoes 1, 2, 10, 25, 64, 128 of white matter', () => {
    // Checks, section 2, white matter 832/79.6.
    const at = [1, 2, 10, 25, 64, 128];
    const train = (deg: number) =>
      echoAmplitudes({
        t1Ms: 832,
        t2Ms: 79.6,
        echoSpacingMs: 4,
        refocusingDeg: constant(deg, 128),
      });
    const low = train(120);
    const full = train(180);
    [0.71324, 0.86363, 0.55685, 0.28306, 0.05261, 0.00355].forEach((v, i) =>
      expect(Math.abs((low[(at[i] ?? 1) - 1] ?? 0) - v)).toBeLessThan(6e-6),
    );
    [0.95099, 0.90438, 0.60501, 0.28471, 0.04011, 0.00161].forEach((v, i) =>
      expect(Math.abs((full[(at[i] ?? 1) - 1] ?? 0) - v)).toBeLessThan(6e-6),
    );
    // Stimulated parts decay with T1: late echoes are stronger at the lower angle.
    expect((low[127] ?? 0) / (full[127] ?? 1)).toBeGreaterThan(1);
  });

  it('equal T1 and T2 only scale the lossless train by exp(-n spacing / T)', () => {
    // Derived, checks section 2.
    const angles = [70, 140, 30, 95, 180, 60, 120, 85];
    const free = lossless(angles);
    const damped = echoAmplitudes({ t1Ms: 90, t2Ms: 90, echoSpacingMs: 10, refocusingDeg: angles });
    damped.forEach((e, n) =>
      expect(e).toBeCloseTo((free[n] ?? 0) * Math.exp((-(n + 1) * 10) / 90), 12),
    );
  });
});

describe('what cannot be a train', () => {
  it.each([
    [{ t1Ms: NaN }, 'T1'],
    [{ t2Ms: -1 }, 'T2'],
    [{ echoSpacingMs: 0 }, 'echo spacing'],
    [{ refocusingDeg: [180, 720] }, 'refocusing flip angle 2'],
    [{ refocusingDeg: [] }, 'refocusing angles: none'],
    [{ excitationDeg: -5 }, 'excitation flip angle'],
    [{ b1Scale: Infinity }, 'B1 scale'],
  ])('%j is refused by name', (wrong, name) => {
    const train = { t1Ms: 800, t2Ms: 80, echoSpacingMs: 10, refocusingDeg: [180], ...wrong };
    expect(() => echoAmplitudes(train)).toThrow(ProblemError);
    expect(() => echoAmplitudes(train)).toThrow(name);
  });
});
