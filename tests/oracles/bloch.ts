/**
 * Brute-force Bloch simulation of a CPMG train: many isochromats, each turned by its own angle between pulses, with
 * relaxation; no phase graph anywhere. With more isochromats than dephasing orders the mean is exact.
 * Rotation matrices and relaxation as in any text on the Bloch equations (Bloch 1946).
 */
export interface BlochTrain {
  readonly t1Ms: number;
  readonly t2Ms: number;
  readonly echoSpacingMs: number;
  readonly refocusingDeg: readonly number[];
  readonly excitationDeg: number;
  readonly b1Scale: number;
}

/** Echo amplitudes for a start at `startMz`, and the mean longitudinal magnetisation after the last echo. */
export function blochTrain(
  train: BlochTrain,
  startMz: number,
): { echoes: number[]; endMz: number } {
  const count = 4 * train.refocusingDeg.length + 8;
  const x = new Float64Array(count);
  const y = new Float64Array(count);
  const z = new Float64Array(count);
  const excitation = (train.excitationDeg * train.b1Scale * Math.PI) / 180;
  for (let i = 0; i < count; i++) {
    // Turn about x: magnetisation goes from z to -y; its sign is taken positive here.
    y[i] = Math.sin(excitation) * startMz;
    z[i] = Math.cos(excitation) * startMz;
  }
  const half = train.echoSpacingMs / 2;
  const e1 = Math.exp(-half / train.t1Ms);
  const e2 = Math.exp(-half / train.t2Ms);
  const precess = () => {
    for (let i = 0; i < count; i++) {
      const angle = (2 * Math.PI * (i + 0.37)) / count;
      const c = Math.cos(angle);
      const s = Math.sin(angle);
      const xi = x[i]!;
      const yi = y[i]!;
      x[i] = (c * xi - s * yi) * e2;
      y[i] = (s * xi + c * yi) * e2;
      z[i] = 1 - (1 - z[i]!) * e1;
    }
  };
  const echoes: number[] = [];
  for (const deg of train.refocusingDeg) {
    precess();
    const angle = (deg * train.b1Scale * Math.PI) / 180;
    const c = Math.cos(angle);
    const s = Math.sin(angle);
    for (let i = 0; i < count; i++) {
      // Turn about y, parallel to the excited magnetisation.
      const xi = x[i]!;
      const zi = z[i]!;
      x[i] = c * xi + s * zi;
      z[i] = -s * xi + c * zi;
    }
    precess();
    echoes.push(y.reduce((sum, v) => sum + v, 0) / count);
  }
  return { echoes, endMz: z.reduce((sum, v) => sum + v, 0) / count };
}

/**
 * Echoes in the steady state over repeats, and the longitudinal magnetisation before excitation. Transverse
 * magnetisation is spoiled between trains and after the inversion. Repeats simply follow each other, 400 of them, so a
 * repeat of a tenth of T1 or more has long settled.
 */
export function blochSteadyState(
  train: BlochTrain,
  repeat: {
    readonly repetitionTimeMs: number;
    readonly inversion?: { readonly inversionTimeMs: number; readonly flipDeg: number };
  },
): { echoes: number[]; startMz: number } {
  const trainMs = train.refocusingDeg.length * train.echoSpacingMs;
  const inversionMs = repeat.inversion?.inversionTimeMs ?? 0;
  const recover = (m: number, ms: number) => 1 - (1 - m) * Math.exp(-ms / train.t1Ms);
  let startMz = 1;
  for (let n = 0; n < 400; n++) {
    const { endMz } = blochTrain(train, startMz);
    startMz = recover(endMz, repeat.repetitionTimeMs - trainMs - inversionMs);
    if (repeat.inversion !== undefined) {
      const angle = (repeat.inversion.flipDeg * train.b1Scale * Math.PI) / 180;
      startMz = recover(startMz * Math.cos(angle), inversionMs);
    }
  }
  return { echoes: blochTrain(train, startMz).echoes, startMz };
}
