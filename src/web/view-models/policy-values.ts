import { grades, gradeWords, type Grade } from '../../exams/index.js';
import { figure, inWords, percent, secondsWords } from './value-words.js';

/** Names of values that are chances or shares. */
const isShare = /confidence|chance|reached|correct|carryOver|acceptance|contrastToNoise/i;
/** Less is better there: a level is the most that still counts. */
const isMost = /borderOverCaliper/;

/**
 * A value of the policy in words, one line per part, each with its unit. A level of a grade stands with the
 * words of its grade.
 *
 * @param path names that lead to the value; the nearest one with a unit gives it
 */
export function policyValueLines(value: unknown, path: readonly string[]): readonly string[] {
  const grade = grades.find((g) => g === value);
  if (grade !== undefined) return [gradeWords[grade]];
  if (value === null || typeof value !== 'object') return [oneValue(value, path)];
  const parts = value as Readonly<Record<string, unknown>>;
  if ('chance' in parts && 'atS' in parts) {
    return [
      `${percent(Number(parts['chance']))} still do at ${secondsWords(Number(parts['atS']))}`,
    ];
  }
  if ('meanS' in parts && 'cv' in parts) {
    return [
      `mean ${secondsWords(Number(parts['meanS']))}, coefficient of variation ${String(parts['cv'])}`,
    ];
  }
  return Object.entries(parts).map(([name, part]) => {
    const level = grades.find((g) => g === name);
    return level === undefined
      ? `${inWords(name).words}: ${oneValue(part, [...path, name])}`
      : levelWords(level, Number(part), path);
  });
}

function levelWords(grade: Grade, level: number, path: readonly string[]): string {
  const end = path[path.length - 1] ?? '';
  return `${isMost.test(end) ? 'up to' : 'from'} ${percent(level)}: ${gradeWords[grade]}`;
}

function oneValue(value: unknown, path: readonly string[]): string {
  if (typeof value !== 'number') return String(value);
  if (path.some((name) => isShare.test(name))) return percent(value);
  const unit = path.map((name) => inWords(name).unit).findLast((u) => u !== '');
  if (unit === 's') return secondsWords(value);
  if (unit === undefined) return figure(value);
  return `${value} ${value === 1 ? unit.replace(/^(day|year)s$/, '$1') : unit}`;
}
