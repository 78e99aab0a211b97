import { createHash } from 'node:crypto';
import type { Scanner } from '../../day/index.js';
import type { ExamRequest } from '../../planning/index.js';
import type { AdviceAsked, AdviceRow } from '../../throughput/index.js';
import type { MonthDesk } from '../../throughput/pool/month-desk.js';

/** Slot advice that was asked for: the rows, or how far it is. */
export type Advice =
  | { readonly kind: 'rows'; readonly rows: readonly AdviceRow[] }
  | { readonly kind: 'working'; readonly done: number; readonly of: number };

interface Asked {
  readonly answer: Promise<readonly AdviceRow[]>;
  done: number;
  of: number;
}

const mostKept = 6;
/** A page that takes longer than this says how far it is instead. */
const patienceMs = 4000;

/** Slot advice worked out once for the same records and wishes, however many ask, whether or not they wait for it. */
export class AdviceRuns {
  private readonly asked = new Map<string, Asked>();

  constructor(private readonly desk: MonthDesk) {}

  /** @throws Error what broke while it was worked out; the next one who asks begins anew */
  async get(
    requests: readonly ExamRequest[],
    scanners: readonly Scanner[],
    wishes: AdviceAsked & { readonly quickLooks: boolean },
  ): Promise<Advice> {
    const key = createHash('sha256')
      .update(JSON.stringify([requests, scanners, wishes]))
      .digest('hex');
    const one = this.asked.get(key) ?? this.begin(key, requests, scanners, wishes);
    const rows = await Promise.race([one.answer, later(patienceMs)]);
    return rows === undefined
      ? { kind: 'working', done: one.done, of: one.of }
      : { kind: 'rows', rows };
  }

  private begin(
    key: string,
    requests: readonly ExamRequest[],
    scanners: readonly Scanner[],
    asked: AdviceAsked & { readonly quickLooks: boolean },
  ): Asked {
    const one: Asked = {
      ...{ done: 0, of: 0 },
      answer: this.desk.advise(requests, scanners, asked, {
        onPlanned: (done, of) => {
          one.done = done;
          one.of = of;
        },
      }),
    };
    this.asked.set(key, one);
    one.answer.catch(() => this.asked.delete(key));
    for (const old of this.asked.keys()) {
      if (this.asked.size <= mostKept) break;
      this.asked.delete(old);
    }
    return one;
  }
}

const later = (ms: number) =>
  new Promise<undefined>((resolve) => setTimeout(() => resolve(undefined), ms).unref());
