import { echoAmplitudes, tissueAt } from '../../src/physics/index.js';
import { textbookEchoes } from './epg-textbook.js';
import type { BenchCase } from './run.js';

const tissues = [
  'white matter',
  'grey matter',
  'csf',
  'fat',
  'muscle',
  'liver',
  'spleen',
  'bile',
  'cartilage',
  'prostate',
];
const trains = tissues.map((name) => {
  const { t1Ms, t2Ms } = tissueAt(name, 3);
  return { t1Ms, t2Ms, echoSpacingMs: 4, refocusingDeg: new Array<number>(256).fill(120) };
});

for (const train of trains) {
  const own = echoAmplitudes(train);
  textbookEchoes(train).forEach((echo, n) => {
    if (Math.abs(echo - (own[n] ?? NaN)) > 1e-9)
      throw new Error(`echo ${n + 1} differs from the textbook`);
  });
}

export const cases: BenchCase[] = [
  {
    name: 'echo trains, 256 echoes x 10 tissues, against a textbook phase graph',
    subject: () => trains.map((train) => echoAmplitudes(train)),
    reference: () => trains.map((train) => textbookEchoes(train)),
    limitMs: 10,
  },
];
