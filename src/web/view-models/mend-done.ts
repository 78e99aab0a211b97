import { z } from 'zod';
import {
  moveWords,
  placeWords,
  sentence,
  slotWords,
  type Booking,
  type Department,
} from '../../day/index.js';
import type { Change } from '../../store/index.js';
import type { MendPerson } from './mend-page.js';

const image = z.object({
  requestId: z.string(),
  scannerId: z.string(),
  date: z.string(),
  startMin: z.number(),
  slotMin: z.number(),
});

/** Whom to tell after a proposal was accepted, read from its lines of history. */
export interface MendDone {
  readonly people: readonly (MendPerson & { readonly waits: boolean })[];
  readonly undone: boolean;
}

/** The joint change with this number; undefined when no such change was made. `lines`: the history after it. */
export function mendDone(
  lines: readonly Change[],
  joint: number,
  department: Department,
  day: string,
  examOf: (requestId: string) => string,
): MendDone | undefined {
  const own = lines.filter((c) => c.joint === joint && c.what === 'booking');
  if (own.length === 0) return undefined;
  const put = new Set(lines.flatMap((c) => (c.undoes === null ? [] : [c.undoes])));
  return {
    undone: own.some((c) => put.has(c.seq)),
    people: own.flatMap((c) => {
      const to = image.safeParse(c.to);
      if (!to.success) return [];
      const from = image.safeParse(c.from);
      const { requestId } = to.data;
      return [
        {
          requestId,
          exam: examOf(requestId),
          words: [saidOf(c.action, from.data, to.data, department, day)],
          waits: c.action === 'cancelled',
        },
      ];
    }),
  };
}

function saidOf(
  action: string,
  from: Booking | undefined,
  to: Booking,
  department: Department,
  day: string,
): string {
  const at = (b: Booking) => placeWords(b, department, day);
  if (action === 'cancelled') return `Had ${at(to)}; has no place any more and waits again.`;
  if (from === undefined) return `Has ${at(to)} now, ${to.slotMin} minutes.`;
  return sentence(`${moveWords(from, to, department, day)}${slotWords(from, to)}`);
}
