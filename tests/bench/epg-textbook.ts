/**
 * The extended phase graph as a textbook writes it: complex states F+, F-, Z up to the highest order, one matrix product per
 * pulse and order, one shift per half echo spacing, nothing dropped (Weigel 2015, equations for T, S and E). The bench holds the
 * project's own version against it.
 */
export function textbookEchoes(train: {
  readonly t1Ms: number;
  readonly t2Ms: number;
  readonly echoSpacingMs: number;
  readonly refocusingDeg: readonly number[];
}): number[] {
  const count = train.refocusingDeg.length;
  const orders = 2 * count + 2;
  const zeros = () => new Float64Array(orders);
  // Real parts suffice for CPMG: excited magnetisation and the states it feeds stay on one axis.
  let plus = zeros();
  let minus = zeros();
  let along = zeros();
  plus[0] = 1;
  minus[0] = 1;
  const half = train.echoSpacingMs / 2;
  const e1 = Math.exp(-half / train.t1Ms);
  const e2 = Math.exp(-half / train.t2Ms);
  const shift = () => {
    const p = zeros();
    const m = zeros();
    for (let k = 0; k < orders - 1; k++) p[k + 1] = plus[k]! * e2;
    for (let k = 1; k < orders; k++) m[k - 1] = minus[k]! * e2;
    p[0] = m[0]!;
    plus = p;
    minus = m;
    along = along.map((z) => z * e1);
  };
  return train.refocusingDeg.map((deg) => {
    shift();
    const a = (deg * Math.PI) / 180;
    const c2 = Math.cos(a / 2) ** 2;
    const s2 = Math.sin(a / 2) ** 2;
    const p = zeros();
    const m = zeros();
    const z = zeros();
    for (let k = 0; k < orders; k++) {
      p[k] = c2 * plus[k]! + s2 * minus[k]! + Math.sin(a) * along[k]!;
      m[k] = s2 * plus[k]! + c2 * minus[k]! - Math.sin(a) * along[k]!;
      z[k] = (Math.sin(a) / 2) * (minus[k]! - plus[k]!) + Math.cos(a) * along[k]!;
    }
    plus = p;
    minus = m;
    along = z;
    shift();
    return plus[0]!;
  });
}
