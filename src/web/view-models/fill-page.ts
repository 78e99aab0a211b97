import { clock, scannerName, type Department, type FillProposal } from '../../day/index.js';
import type { FillSearch } from '../fill-searches.js';

/** How long a search may take, in words a scheduler has a use for. */
export const searchLengths = [
  { seconds: 3, words: 'short, about 3 seconds' },
  { seconds: 10, words: 'a careful search, about 10 seconds' },
  { seconds: 30, words: 'a long search for a crowded week, about half a minute' },
] as const;

export interface FillView {
  readonly summary: string;
  readonly found: string;
  readonly placements: readonly {
    readonly requestId: string;
    readonly place: string;
    /** What the tick box sends back. */
    readonly value: string;
    readonly why: readonly string[];
  }[];
  readonly waiting: FillProposal['waiting'];
}

export function fillView(proposal: FillProposal, department: Department): FillView {
  const { placements, waiting, objective, bound } = proposal;
  return {
    summary: `${placements.length} of ${placements.length + waiting.length} can be placed. ${answersWords(objective.diagnostic, bound.diagnostic)}`,
    found: `Found by ${proposal.provedBy}. Nothing is booked yet.`,
    placements: placements.map((p) => ({
      requestId: p.requestId,
      place: `${p.date} ${clock(p.startMin)}, ${p.slotMin} minutes on ${scannerName(p.scannerId, department)}`,
      value: [p.requestId, p.scannerId, p.date, p.startMin, p.slotMin].join('|'),
      why: p.why,
    })),
    waiting,
  };
}

/** What is reached against what any filling could reach. */
function answersWords(reached: number, most: number): string {
  const so = `Diagnostic answers, counted by weight, priority and due date: ${reached} of at most ${most}`;
  return reached >= most
    ? `${so}; no filling has more.`
    : `${so}; at most ${(100 * (1 - reached / most)).toFixed(1)} % more is possible.`;
}

export interface SearchView {
  readonly percent: number;
  readonly heading: string;
  readonly words: string;
}

/** A running search: how far it is, and what it has. */
export function searchView({ at, share, offered, reached, bound }: FillSearch): SearchView {
  const percent = Math.floor(100 * share);
  if (at === 'offers')
    return {
      percent,
      heading: 'Working out what each patient would get on each scanner',
      words: offered.of === 0 ? '' : `${offered.done} of ${offered.of} patients looked at.`,
    };
  if (at === 'bound' || reached === undefined || bound === undefined)
    return {
      percent,
      heading: 'Working out how much any filling could reach',
      words: 'Without that, nobody could say whether a proposal is good.',
    };
  const rest =
    reached.diagnostic >= bound.diagnostic
      ? ' What is left of the search is for fewer overruns, fewer coil changes and earlier visits.'
      : '';
  return {
    percent,
    heading: 'Searching',
    words: answersWords(reached.diagnostic, bound.diagnostic) + rest,
  };
}

/** What is said above a proposal whose search did not run to its end. */
export function endedWords({ state, proposal }: FillSearch): string | undefined {
  if (state !== 'stopped' || proposal === undefined) return undefined;
  const all = proposal.objective.diagnostic >= proposal.bound.diagnostic;
  return `The search was stopped early: this is the best it had found. ${
    all ? 'Longer, it could at most find earlier or calmer places.' : 'Longer, it may find more.'
  }`;
}
