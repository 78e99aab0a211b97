import { bestOrder, type OrderItem } from '../../src/planning/order.js';
import { chooseCurve, chooseExactly } from '../../src/planning/solver/exact.js';
import { linearSolver } from '../../src/planning/solver/linear.js';
import type { ChoiceProblem } from '../../src/planning/solver/problem.js';
import { highsChoice, loadHighsOnce } from '../oracles/highs-choice.js';
import { inventedExam, stream } from '../planning/instances.js';
import type { BenchCase } from './run.js';

const exams = (certain: boolean): ChoiceProblem[] =>
  Array.from({ length: 40 }, (_, i) =>
    inventedExam(1_000 + i, { views: 10, candidates: 5, questions: 5, certain }),
  );

/** Each run takes the next exam, so the spread is over exams; subject and reference see the same ones. */
function inTurn<T>(
  problems: readonly ChoiceProblem[],
  run: (problem: ChoiceProblem) => T,
): () => T {
  let next = 0;
  return () => run(problems[next++ % problems.length]!);
}

export const cases = async (): Promise<BenchCase[]> => {
  const highs = await loadHighsOnce();
  const linear = linearSolver({ wallClockMs: 10_000 });
  const kinds = [
    ['certain times', exams(true), 20],
    ['random times', exams(false), 100],
  ] as const;
  return [
    ...kinds.flatMap(([times, problems, limitMs]) => [
      {
        name: `exam choice, exact, 10 views x 5, ${times}, against HiGHS`,
        subject: inTurn(problems, (problem) => chooseExactly(problem)),
        reference: inTurn(problems, (problem) => highsChoice(highs, problem)),
        limitMs,
      },
      {
        name: `exam choice, linear, 10 views x 5, ${times}, against HiGHS`,
        subject: inTurn(problems, (problem) => linear.choose(problem)),
        reference: inTurn(problems, (problem) => highsChoice(highs, problem)),
        limitMs,
      },
    ]),
    {
      name: 'time-answer curve of 12 slots, against one by one',
      subject: inTurn(kinds[1][1], (problem) => chooseCurve(problem, slotsS)),
      reference: inTurn(kinds[1][1], (problem) =>
        slotsS.map((slotS) => chooseExactly({ ...problem, slotS })),
      ),
    },
    { name: 'running order of 9 with contrast', subject: () => bestOrder(order(9)), limitMs: 20 },
    {
      name: 'running order of 14 with contrast',
      subject: () => bestOrder(order(14)),
      limitMs: 1_000,
    },
  ];
};

const slotsS = Array.from({ length: 12 }, (_, i) => 600 + 300 * i);

function order(count: number) {
  const random = stream('bench order', count);
  const items: OrderItem[] = Array.from({ length: count - 1 }, (_, i) => ({
    id: `i${i}`,
    durationS: 30 + Math.floor(200 * random()),
    after: [],
    ...(i % 3 === 0 ? { earliestAfterInjectionS: 40 * i } : {}),
  }));
  const questions = items.map(({ id }) => ({
    id,
    value: 1 + Math.floor(8 * random()),
    needs: [id],
  }));
  items.push({ id: 'contrast', durationS: 60, after: [], injection: true });
  return { items, questions, survival: (tS: number) => Math.exp(-tS / 1500), startS: 0 };
}
