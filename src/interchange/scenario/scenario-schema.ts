import { z } from 'zod';
import { patientGroups } from '../../throughput/index.js';

const minutes = z.number();

/** How long slots are, as in `SlotRule`. */
const slotRule = z.discriminatedUnion('kind', [
  z.strictObject({ kind: z.literal('fixed'), minutes }),
  z.strictObject({
    kind: z.literal('by exam'),
    minutes: z.record(z.string(), minutes),
    otherwise: minutes,
  }),
  z.strictObject({ kind: z.literal('tolerance'), mostMin: minutes }),
]);

const team = z.strictObject({
  name: z.string(),
  count: z.number(),
  groups: z.array(z.enum(patientGroups)),
});

/** Every field of a scenario but its scanners; what the numbers may be is checked apart, at each field. */
export const scenarioFields = {
  name: z.string(),
  requestsPerDay: z.number(),
  listAtStart: z.number(),
  examShares: z.record(z.string(), z.number()).exactOptional(),
  groupShares: z.partialRecord(z.enum(patientGroups), z.number()).exactOptional(),
  slots: slotRule,
  content: z.enum(['planned', 'full protocol']),
  quickLooks: z.boolean(),
  cutShortAfterMin: minutes.exactOptional(),
  bufferMin: minutes,
  overbooked: z.number(),
  groupByCoil: z.boolean(),
  emergenciesPerDay: z.number(),
  noShowShare: z.number(),
  lateShare: z.number(),
  lateMeanMin: minutes,
  earlyMin: minutes,
  technologists: z.number(),
  teams: z.array(team),
  followUpShare: z.number(),
  followUpAfterDays: z.number(),
  cannulaShare: z.number(),
  cannulaMeanMin: minutes,
  downShare: z.number(),
  downMeanMin: minutes,
  overtimeUpToMin: minutes,
  months: z.number(),
  daysAMonth: z.number(),
  seed: z.number(),
};

const stretch = z.strictObject({ fromMin: z.number(), toMin: z.number() });

/** A scenario as it is kept, whole. */
export const storedScenario = z.strictObject({
  ...scenarioFields,
  scanners: z.array(
    z.strictObject({
      id: z.string().min(1),
      name: z.string().min(1),
      fieldT: z.union([z.literal(1.5), z.literal(3)]),
      boreCm: z.number(),
      coils: z.array(z.string()),
      hours: z.array(stretch),
      breaks: z.array(stretch),
    }),
  ),
});
