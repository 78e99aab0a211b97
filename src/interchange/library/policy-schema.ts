import { z } from 'zod';
import { bases, families } from '../../sequences/index.js';
import { grades, learnedKinds } from '../../exams/index.js';

const text = z.string().min(2);
const date = z.iso.date();
const chance = z.number().min(0).max(1);
const level = z.number().nonnegative();

const sourced = <T extends z.ZodType>(value: T) =>
  z.strictObject({ value, basis: z.enum(bases as [string, ...string[]]), source: text });

const levels = z.strictObject({ diagnostic: level, targeted: level, screening: level });
/** More is better: a higher grade asks for more. */
const risingLevels = levels.refine((l) => l.diagnostic >= l.targeted && l.targeted >= l.screening, {
  message: 'diagnostic must ask for at least as much as targeted, and targeted as screening',
});
/** Less is better. */
const fallingLevels = levels.refine(
  (l) => l.diagnostic <= l.targeted && l.targeted <= l.screening,
  {
    message: 'diagnostic must allow no more than targeted, and targeted no more than screening',
  },
);
const spread = z.strictObject({ meanS: z.number().nonnegative(), cv: z.number().min(0).max(3) });
const calibration = z.strictObject({ chance: z.number().gt(0).lt(1), atS: z.number().positive() });
const seconds = z.number().nonnegative();

const entry = z.strictObject({
  question: z.string().regex(/^[a-z0-9-]+\/([a-z0-9-]+|\*)$/, 'exam/question, or exam/*'),
  family: z.enum(families as [string, ...string[]]),
  atMost: z.enum(grades),
  because: text,
  basis: z.enum(bases as [string, ...string[]]),
  source: text,
  signedBy: text,
  signedOn: date,
});

const otherwise = z.strictObject(
  Object.fromEntries(families.map((f) => [f, sourced(z.enum(grades))])),
);

const learningEntry = z.strictObject({
  group: text,
  kind: z.enum(learnedKinds),
  signedBy: text,
  signedOn: date,
  because: text,
  readAtS: z.number().positive().exactOptional(),
  readAtShare: z.number().gt(0).max(1).exactOptional(),
});

/** A policy without this section replaces nothing by what was learned. */
const learning = z
  .strictObject({
    leastRecords: sourced(z.number().int().min(5).max(10_000)),
    entries: z
      .array(learningEntry)
      .refine(
        (entries) => new Set(entries.map((e) => `${e.kind}/${e.group}`)).size === entries.length,
        'one entry a group and kind; put the newer signature in the place of the older',
      ),
  })
  .default({
    leastRecords: { value: 30, basis: 'assumption', source: 'Set by us; the file names none' },
    entries: [],
  });

export const policyFile = z.strictObject({
  site: text,
  signedBy: text,
  signedOn: date,
  catalogue: z.strictObject({ otherwise, entries: z.array(entry) }),
  physics: z.strictObject({
    relativeContrastToNoise: sourced(risingLevels),
    borderOverCaliper: sourced(fallingLevels),
  }),
  movement: z.strictObject({
    cleanChance: sourced(risingLevels),
    restCarryOver: sourced(chance),
    assumedElapsedS: sourced(seconds),
    retakeUpToS: sourced(seconds),
    bladesCorrect: sourced(chance),
    shape: sourced(z.number().min(0.2).max(10)),
  }),
  breathing: sourced(
    z.strictObject({
      recoveryGapS: seconds,
      mostHolds: z.number().int().min(1).max(40),
      acceptanceFraction: z.number().gt(0).max(1),
    }),
  ).extend({
    breathsPerMinute: sourced(z.number().min(4).max(80)),
    shape: sourced(z.number().min(0.2).max(10)),
  }),
  time: z.strictObject({
    finishConfidence: sourced(z.number().min(0.5).max(0.999)),
    stayConfidence: sourced(z.number().min(0.05).max(0.999)),
    entry: sourced(spread),
    exit: sourced(spread),
    localiserS: sourced(seconds),
    idleBetweenS: sourced(seconds),
    injection: sourced(spread),
    coilChange: sourced(spread),
    triggeredCv: sourced(z.number().min(0).max(2)),
    classExtraS: z.strictObject({
      outpatient: sourced(seconds),
      inpatient: sourced(seconds),
      emergency: sourced(seconds),
    }),
    transportExtraS: z.strictObject({
      walking: sourced(seconds),
      wheelchair: sourced(seconds),
      trolley: sourced(seconds),
      bed: sourced(seconds),
    }),
  }),
  tolerance: z.strictObject({
    statedReached: z.strictObject({
      patient: sourced(z.number().gt(0).lt(1)),
      carer: sourced(z.number().gt(0).lt(1)),
      referrer: sourced(z.number().gt(0).lt(1)),
      'earlier exam': sourced(z.number().gt(0).lt(1)),
    }),
    still: z.strictObject({
      outpatient: sourced(calibration),
      inpatient: sourced(calibration),
      emergency: sourced(calibration),
    }),
    stillChild: z.array(sourced(calibration).extend({ underYears: z.number().positive() })),
    holdAdult: sourced(spread),
    holdBreathless: sourced(spread),
    holdFromYears: sourced(z.number().nonnegative()),
    stay: sourced(calibration),
    stayClaustrophobic: sourced(calibration),
    plannedReached: sourced(z.number().gt(0).lt(1)),
  }),
  learning,
  owed: z.strictObject({
    dueDays: z.strictObject({
      stat: sourced(z.number().int().positive()),
      asap: sourced(z.number().int().positive()),
      urgent: sourced(z.number().int().positive()),
      routine: sourced(z.number().int().positive()),
    }),
  }),
});
