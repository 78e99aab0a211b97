import { uniformFloat64 } from 'pure-rand/distribution/uniformFloat64';
import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus';
import type { GradeRank } from '../../src/exams/index.js';
import { atSeconds, convolve, lognormal } from '../../src/planning/distribution.js';
import {
  compareObjectives,
  judgeChoice,
  type Choice,
  type ChoiceProblem,
} from '../../src/planning/solver/problem.js';
import { sequenceTime } from '../../src/planning/table-time.js';

/** A stream of uniform numbers in [0, 1). Small raw seeds start near 1.0, so the seed is mixed and jumped once. */
export function stream(name: string, seed: number): () => number {
  let mixed = seed | 0;
  for (const char of name)
    mixed = Math.imul(mixed ^ char.charCodeAt(0), 0x9e3779b1) ^ (mixed >>> 15);
  const generator = xoroshiro128plus(mixed);
  generator.jump();
  return () => uniformFloat64(generator);
}

export interface InstanceSize {
  readonly views: number;
  readonly candidates: number;
  readonly questions: number;
  /** Sequence times are certain; only entry and exit vary. */
  readonly certain?: boolean;
}

/**
 * An invented exam: from a slow diagnostic to a quick screening candidate per view, with ranks and quality that mostly, not
 * always, fall with time; some views after contrast that require their twin and share an injection.
 */
export function inventedExam(seed: number, size: InstanceSize): ChoiceProblem {
  const random = stream('exam', seed);
  const whole = (low: number, high: number) => low + Math.floor(random() * (high - low + 1));
  const questions = Array.from({ length: size.questions }, (_, q) => {
    const needs = new Set(Array.from({ length: whole(1, 3) }, () => whole(0, size.views - 1)));
    return { id: `q${q}`, weight: whole(1, 9), needs: [...needs] };
  });
  const firstContrast = whole(Math.ceil(size.views / 2), size.views);
  const views = Array.from({ length: size.views }, (_, v) => {
    const fullS = whole(120, 420);
    const candidates = Array.from({ length: whole(1, size.candidates) }, (_, c) => {
      const shrink = 1 / (1 + 0.6 * c + 0.5 * random());
      const acquisitionS = Math.max(15, Math.round(fullS * shrink));
      const top = Math.max(1, 3 - Math.floor(c * 0.8 + random() * 0.9));
      const ranks = questions.map(() => Math.max(0, top - (random() < 0.2 ? 1 : 0)) as GradeRank);
      return {
        id: `v${v}c${c}`,
        ranks,
        quality: Math.min(100, Math.round(100 * shrink ** 0.4 - 10 * random())),
        nominalS: acquisitionS + 20,
        time: size.certain
          ? atSeconds(acquisitionS + 20)
          : inventedTime(random, acquisitionS, whole(0, 3)),
      };
    });
    return {
      id: `v${v}`,
      candidates,
      ...(v >= firstContrast && random() < 0.5
        ? { requiresView: whole(0, firstContrast - 1) }
        : {}),
    };
  });
  const contrast = views.flatMap((_, v) => (v >= firstContrast ? [v] : []));
  return {
    questions,
    views,
    base: convolve(lognormal(300 + 200 * random(), 0.25), atSeconds(60)),
    baseNominalS: 60,
    shared:
      contrast.length === 0
        ? []
        : [
            {
              views: contrast,
              nominalS: 90,
              time: size.certain ? atSeconds(90) : lognormal(90, 0.3),
            },
          ],
    slotS: 60 * whole(15, 15 + 4 * size.views),
    confidence: [0.8, 0.9, 0.95][whole(0, 2)]!,
    stayLimitS: random() < 0.3 ? 60 * whole(8, 40) : 7200,
  };
}

function inventedTime(random: () => number, acquisitionS: number, kind: number) {
  const idleS = 20;
  if (kind === 0) return sequenceTime({ acquisitionS, idleS, repeatChance: 0 });
  if (kind === 1) return sequenceTime({ acquisitionS, idleS, repeatChance: 0.3 * random() });
  if (kind === 2) {
    const retake = { intervals: 6, intervalS: acquisitionS / 6, spoilChance: 0.2 * random() };
    return sequenceTime({ acquisitionS, idleS, repeatChance: 0, retake });
  }
  return sequenceTime({ acquisitionS, idleS, repeatChance: 0.1, variation: 0.15 });
}

/** Best of every combination of picks; for small problems only. */
export function bestByTryingAll(problem: ChoiceProblem): Choice {
  const picks = problem.views.map(() => -1);
  let best = judgeChoice(problem, picks).choice;
  const descend = (v: number): void => {
    if (v === problem.views.length) {
      const { feasible, choice } = judgeChoice(problem, picks);
      if (feasible && compareObjectives(choice.objective, best.objective) > 0) best = choice;
      return;
    }
    for (let c = -1; c < problem.views[v]!.candidates.length; c++) {
      picks[v] = c;
      descend(v + 1);
    }
    picks[v] = -1;
  };
  descend(0);
  return best;
}
