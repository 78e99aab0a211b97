import { readdir } from 'node:fs/promises';

/**
 * Runs every `*.bench.ts` beside it. Subject and reference take turns in the same process, so that a busy machine slows
 * both. Prints medians, the range, the ratio, and whether the limits given hold.
 * Options: --json, and words that a case's name must contain.
 */
export interface BenchCase {
  readonly name: string;
  readonly subject: () => unknown;
  readonly reference?: () => unknown;
  /** Rounds to run, where the case knows: one per request, say. */
  readonly rounds?: number;
  /** Limit for the subject's median, milliseconds. */
  readonly limitMs?: number;
  /** Limit for the slowest run, milliseconds. */
  readonly worstMs?: number;
}

interface Spread {
  readonly medianMs: number;
  readonly p95Ms: number;
  readonly minMs: number;
  readonly maxMs: number;
}

interface Outcome {
  readonly name: string;
  readonly rounds: number;
  readonly subject: Spread;
  readonly reference?: Spread;
  /** Median of subject over median of reference. */
  readonly ratio?: number;
  readonly broken: readonly string[];
}

const mostRounds = 25;
const leastRounds = 5;
const warmUps = 3;
const budgetMs = 20_000;

async function timed(run: () => unknown): Promise<number> {
  const beganMs = performance.now();
  await run();
  return performance.now() - beganMs;
}

function spread(times: readonly number[]): Spread {
  const sorted = [...times].sort((a, b) => a - b);
  const at = (share: number) =>
    sorted[Math.min(sorted.length - 1, Math.floor(share * sorted.length))]!;
  return { medianMs: at(0.5), p95Ms: at(0.95), minMs: sorted[0]!, maxMs: sorted.at(-1)! };
}

async function measure(one: BenchCase): Promise<Outcome> {
  let onceMs = 0;
  for (let i = 0; i < warmUps; i++) {
    onceMs = (await timed(one.subject)) + (one.reference ? await timed(one.reference) : 0);
    if (onceMs * warmUps > budgetMs / 4) break;
  }
  const affordable = Math.floor(budgetMs / Math.max(onceMs, 0.001));
  const rounds = one.rounds ?? Math.max(leastRounds, Math.min(mostRounds, affordable));
  const subjectMs: number[] = [];
  const referenceMs: number[] = [];
  for (let i = 0; i < rounds; i++) {
    const referenceFirst = i % 2 === 1;
    if (one.reference && referenceFirst) referenceMs.push(await timed(one.reference));
    subjectMs.push(await timed(one.subject));
    if (one.reference && !referenceFirst) referenceMs.push(await timed(one.reference));
  }
  const subject = spread(subjectMs);
  const reference = one.reference ? spread(referenceMs) : undefined;
  const broken = [
    ...(subject.medianMs > (one.limitMs ?? Infinity) ? [`median over ${one.limitMs} ms`] : []),
    ...(subject.maxMs > (one.worstMs ?? Infinity) ? [`slowest over ${one.worstMs} ms`] : []),
  ];
  return {
    name: one.name,
    rounds,
    subject,
    ...(reference ? { reference, ratio: subject.medianMs / reference.medianMs } : {}),
    broken,
  };
}

function line({ name, rounds, subject, reference, ratio, broken }: Outcome): string {
  const say = (s: Spread) =>
    `${s.medianMs.toFixed(2)} ms (${s.minMs.toFixed(2)}..${s.maxMs.toFixed(2)}, p95 ${s.p95Ms.toFixed(2)})`;
  const beside =
    reference && ratio !== undefined
      ? `; reference ${say(reference)}; ratio ${ratio.toFixed(3)}`
      : '';
  const verdict = broken.length === 0 ? '' : `  LIMIT BROKEN: ${broken.join(', ')}`;
  return `${name}: ${say(subject)}${beside}; ${rounds} rounds${verdict}`;
}

const words = process.argv.slice(2).filter((word) => !word.startsWith('--'));
const json = process.argv.includes('--json');
const files = (await readdir(new URL('.', import.meta.url)))
  .filter((file) => file.endsWith('.bench.ts'))
  .sort();
const outcomes: Outcome[] = [];
for (const file of files) {
  const { cases } = (await import(new URL(file, import.meta.url).href)) as {
    cases: readonly BenchCase[] | (() => Promise<readonly BenchCase[]>);
  };
  for (const one of typeof cases === 'function' ? await cases() : cases) {
    if (!words.every((word) => one.name.includes(word))) continue;
    const outcome = await measure(one);
    outcomes.push(outcome);
    if (!json) console.log(line(outcome));
  }
}
if (json) console.log(JSON.stringify(outcomes, null, 2));
// A case may have left a server listening.
process.exit(outcomes.some(({ broken }) => broken.length > 0) ? 1 : 0);
