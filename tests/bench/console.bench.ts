import { foldEvents, replan, type ConsoleEvent } from '../../src/console/index.js';
import { examOf, prepare, chooseExactly } from '../../src/planning/index.js';
import { at3, calm, ground, requestFor, shipped } from '../planning/ground.js';
import type { BenchCase } from './run.js';

const kinds = [
  'brain-general',
  'brain-ventricles',
  'liver',
  'spine-lumbar',
  'bile-ducts',
  'brain-tumour-follow-up',
  'prostate',
  'knee',
];

/** A restless patient in every exam: two spoiled tries, then the rest planned anew; never the same stillness twice. */
const stories = kinds.map((examId) => {
  const request = requestFor(examId, {
    tolerance: { ...calm, stay: { kind: 'stated', seconds: 1800 } },
  });
  const found = examOf(request, shipped);
  if (found.kind === 'refused') throw new Error(examId);
  const view = found.value.exam.views[0]!;
  return { exam: { request, ...found.value, scanner: at3, ground }, view, request };
});
let turn = 0;
let choiceTurn = 0;

export const cases: BenchCase[] = [
  {
    name: 're-plan at the scanner after a spoiled try, against one exact choice for the whole exam',
    rounds: 64,
    subject: () => {
      const { exam, view } = stories[turn++ % stories.length]!;
      const started = { kind: 'started', viewId: view.id, sequenceId: view.reference } as const;
      const events: ConsoleEvent[] = [
        { ...started, seq: 1, atS: 300 },
        { kind: 'moved', seq: 2, atS: 320 + turn },
        { ...started, seq: 3, atS: 420 + turn },
        { kind: 'hold failed', afterS: 5 + (turn % 9), seq: 4, atS: 440 + turn },
      ];
      return replan(exam, foldEvents(events, exam.request.tolerance), 1800);
    },
    reference: () => {
      const { request } = stories[choiceTurn++ % stories.length]!;
      const ready = prepare(request, at3, ground);
      return ready.kind === 'ok' ? chooseExactly(ready.value.problem) : undefined;
    },
    limitMs: 100,
    worstMs: 300,
  },
];
