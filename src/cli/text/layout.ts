import wrapAnsi from 'wrap-ansi';

/** Width that fits an ordinary terminal. */
export const pageWidth = 80;

/** Wraps text to the page, further lines indented under the first. */
export function wrapped(text: string, indent: string, hang = indent): string {
  const lines = wrapAnsi(text, pageWidth - Math.max(indent.length, hang.length), {
    hard: true,
  }).split('\n');
  return lines.map((line, n) => (n === 0 ? indent : hang) + line).join('\n');
}

/** Cuts or pads to exactly `width` characters; only for text without colour codes. */
export function fitted(text: string, width: number): string {
  return text.length > width ? `${text.slice(0, width - 1)}~` : text.padEnd(width);
}

/** Seconds as minutes and seconds: 4:05. */
export function minSec(seconds: number): string {
  const whole = Math.round(seconds);
  return `${Math.floor(whole / 60)}:${String(whole % 60).padStart(2, '0')}`;
}

export const percent = (p: number): string =>
  p > 0.995 ? '>99 %' : p > 0 && p < 0.005 ? '<1 %' : `${Math.round(p * 100)} %`;

export const minutesOf = (seconds: number): string => `${Math.round(seconds / 60)} min`;
