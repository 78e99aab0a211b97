import { randomUUID } from 'node:crypto';
import type { FillBound, FillObjective, FillProgress, FillProposal } from '../day/index.js';
import { ProblemError } from '../shared/index.js';
import type { PageDeps } from './deps.js';
import { fillProblem, iterationsIn, slicedFill } from './fill-proposal.js';
import { breath } from './waiting-requests.js';

/** A search for places that runs while its page watches. */
export interface FillSearch {
  readonly id: string;
  readonly days: readonly string[];
  /** How long it was asked to take, about. */
  readonly seconds: number;
  readonly state: 'running' | 'done' | 'stopped' | 'failed';
  /** What it is at, and how far, 0..1. */
  readonly at: 'offers' | 'bound' | 'search';
  readonly share: number;
  /** Requests whose offers are worked out, of how many. */
  readonly offered: { readonly done: number; readonly of: number };
  readonly reached?: FillObjective;
  readonly bound?: FillBound;
  readonly proposal?: FillProposal;
}

interface Running {
  search: FillSearch;
  /** Whose it is: one at a time for each desk. */
  readonly desk: string;
  seenMs: number;
  stopAsked: boolean;
  ended: Promise<void>;
}

const mostAtOnce = 3;
const mostKept = 20;
/** A running search whose page has not asked for it this long is ended. */
const abandonedAfterMs = 15_000;

/**
 * The searches of this server, each a few milliseconds at a time, with everybody else served in between. A desk that asks
 * again ends its own search before; one that nobody looks at ends by itself.
 */
export class FillSearches {
  private readonly running = new Map<string, Running>();

  constructor(private readonly deps: PageDeps) {}

  /** @throws ProblemError when others search already */
  start(desk: string, days: readonly string[], seconds: number): FillSearch {
    for (const one of this.running.values()) if (one.desk === desk) one.stopAsked = true;
    const others = [...this.running.values()].filter(
      (one) => one.search.state === 'running' && !one.stopAsked,
    ).length;
    if (others >= mostAtOnce)
      throw new ProblemError({
        code: 'fill-busy',
        thing: 'search for places',
        value: `${others} other desks are searching just now`,
        limit: `at most ${mostAtOnce} at once`,
        wayOut: 'Go back and try again in half a minute.',
      });
    const search: FillSearch = {
      ...{ id: randomUUID(), days, seconds, state: 'running', at: 'offers', share: 0 },
      offered: { done: 0, of: 0 },
    };
    const one: Running = {
      ...{ search, desk, seenMs: this.deps.now(), stopAsked: false },
      ended: Promise.resolve(),
    };
    this.running.set(search.id, one);
    this.forgetOldest();
    one.ended = this.run(one);
    return search;
  }

  /** The search as it stands; asking for it keeps it going. */
  look(id: string): FillSearch | undefined {
    const one = this.running.get(id);
    if (one !== undefined) one.seenMs = this.deps.now();
    return one?.search;
  }

  /** Ends a search with what it has found so far. */
  async stop(id: string): Promise<void> {
    const one = this.running.get(id);
    if (one === undefined) return;
    one.stopAsked = true;
    await one.ended;
  }

  private async run(one: Running): Promise<void> {
    const { deps } = this;
    const { days, seconds } = one.search;
    const update = (change: Partial<FillSearch>) => (one.search = { ...one.search, ...change });
    try {
      const problem = await fillProblem(deps, days, (done, of) => {
        update({ offered: { done, of }, share: offersShare * (done / of) });
      });
      update({ at: 'bound' });
      const iterations = await iterationsIn(problem, seconds, () => performance.now());
      const began = performance.now();
      const run = slicedFill(problem, iterations);
      let last: FillProgress | undefined;
      let step = run.next();
      while (step.done !== true) {
        last = step.value;
        update({
          ...{ at: 'search', reached: last.objective, bound: last.bound },
          share: offersShare + (1 - offersShare) * (last.iteration / last.of),
        });
        await breath();
        // A busy machine must not make a short search a long one.
        const late = performance.now() - began > 1000 * (1 + 1.5 * seconds);
        const abandoned = deps.now() - one.seenMs > abandonedAfterMs;
        if (one.stopAsked || late || abandoned) break;
        step = run.next();
      }
      const proposal = step.done === true ? step.value : last!.proposal();
      update({
        state: step.done === true ? 'done' : 'stopped',
        ...{ share: 1, reached: proposal.objective, bound: proposal.bound, proposal },
      });
    } catch (error) {
      deps.log('search for places failed', {
        error: error instanceof Error ? error.stack : String(error),
      });
      update({ state: 'failed' });
    }
  }

  private forgetOldest(): void {
    for (const [id, { search }] of this.running) {
      if (this.running.size <= mostKept) return;
      if (search.state !== 'running') this.running.delete(id);
    }
  }
}

/** Part of the bar for working out who could get what. */
const offersShare = 0.2;
