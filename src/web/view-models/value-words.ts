/** Units as they end names in this code, and as a reader knows them. */
const units: readonly (readonly [RegExp, string])[] = [
  [/SPerMm2$/, 's/mm2'],
  [/PerMinute$/, 'per minute'],
  [/Mm2$/, 'mm2'],
  [/Mm$/, 'mm'],
  [/Ms$/, 'ms'],
  [/Deg$/, 'degrees'],
  [/Years$/, 'years'],
  [/Days$/, 'days'],
  [/S$/, 's'],
];

/** A name of the code in words, its unit apart: `repetitionTimeMs` is "repetition time" in ms. */
export function inWords(name: string): { readonly words: string; readonly unit: string } {
  const [pattern, unit] = units.find(([p]) => p.test(name)) ?? [/$^/, ''];
  const words = name
    .replace(pattern, '')
    .replace(/-/g, ' ')
    .replace(/([A-Z])/g, (c) => ` ${c.toLowerCase()}`)
    .replace(/^rf\b/, 'RF')
    .replace(/^k space\b/, 'k-space')
    .replace(/^fov\b/, 'field of view,')
    .replace(/^matrix\b/, 'matrix,');
  return { words, unit };
}

export const percent = (share: number) => `${Number((share * 100).toFixed(1))} %`;

/** A figure with at most three digits that count. */
export const figure = (x: number) => Number(x.toPrecision(3)).toString();

/** Seconds; from two minutes on also in minutes. */
export const secondsWords = (s: number) =>
  s < 120 ? `${s} s` : `${s} s (${Number((s / 60).toFixed(1))} min)`;

/** Minutes and seconds as a scanner's console writes them: 3:05. */
export function minutesSeconds(seconds: number): string {
  const whole = Math.round(seconds);
  return `${Math.floor(whole / 60)}:${String(whole % 60).padStart(2, '0')}`;
}
