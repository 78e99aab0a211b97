/// <reference lib="dom" />
/** Sends taps in order, once, and keeps them through a lost connection, a reload or a server that restarts. */
import { happeningOf } from './console-happening.js';

interface QueuedTap {
  readonly tapId: string;
  readonly atS: number;
  readonly happening: Record<string, unknown>;
  /** The words on what was tapped, to name it by if it cannot be kept. */
  readonly words: string;
}

const holder = document.getElementById('console');
const clock = document.querySelector<HTMLElement>('.clock');
const left = document.getElementById('left');
const sending = document.getElementById('sending');
const booking = holder?.dataset['booking'] ?? '';
const storeKey = `stillspan-taps-${booking}`;
const refusedKey = `${storeKey}-refused`;
const retryMs = 1500;
const batchSize = 100;

const zeroMs = Number(clock?.dataset['zeroMs']);
const skewMs = Number(clock?.dataset['serverMs']) - Date.now();
const slotS = Number(clock?.dataset['slotS']);
const nowS = () => (Date.now() + skewMs - zeroMs) / 1000;

let queue: QueuedTap[] = stored();
let busy = false;
let retrying = 0;
let standingIn = '';
/** A tapped button loses the focus when it is switched off: which one it was. */
let tappedWords = '';

function stored(): QueuedTap[] {
  try {
    return JSON.parse(localStorage.getItem(storeKey) ?? '[]') as QueuedTap[];
  } catch {
    return [];
  }
}

function keep(): void {
  if (queue.length === 0) localStorage.removeItem(storeKey);
  else localStorage.setItem(storeKey, JSON.stringify(queue));
  if (sending === null) return;
  sending.textContent =
    queue.length === 0 ? '' : `${queue.length} tap(s) kept here, being sent ...`;
}

async function send(): Promise<void> {
  if (busy || queue.length === 0 || holder === null) return;
  busy = true;
  window.clearTimeout(retrying);
  const batch = queue.slice(0, batchSize);
  try {
    const answer = await fetch(`/console/${encodeURIComponent(booking)}/taps`, {
      method: 'POST',
      headers: { 'Content-Type': 'application/json' },
      body: JSON.stringify({
        taps: batch.map(({ tapId, atS, happening }) => ({ tapId, atS, happening })),
      }),
    });
    // Too many at once, or too slow: as good as a broken server, the taps are not at fault.
    const later = answer.status >= 500 || answer.status === 429 || answer.status === 408;
    if (later) throw new Error(String(answer.status));
    const html = await answer.text();
    const sent = new Set(batch.map((t) => t.tapId));
    queue = queue.filter((t) => !sent.has(t.tapId));
    if (!answer.ok) return refused(batch);
    keep();
    show(html);
  } catch {
    standIn();
    retrying = window.setTimeout(() => void send(), retryMs);
    return;
  } finally {
    busy = false;
  }
  void send();
}

/** The server will never take these: they are named on the page as it stands there now. */
function refused(batch: readonly QueuedTap[]): void {
  keep();
  sessionStorage.setItem(refusedKey, batch.map((t) => t.words).join(', '));
  location.reload();
}

/** While nothing gets through: what was started can be ended, so that its end is tapped when it happens. */
function standIn(): void {
  const doing = holder?.querySelector('.doing');
  const last = queue.findLast((t) => sequenceTaps.has(String(t.happening['kind'])));
  if (doing === null || doing === undefined || last === undefined || last.tapId === standingIn)
    return;
  standingIn = last.tapId;
  const started = last.happening['kind'] === 'started';
  const name = started ? 'meanwhile-running' : 'meanwhile-waiting';
  const template = document.getElementById(name) as HTMLTemplateElement | null;
  if (template === null) return;
  doing.replaceChildren(template.content.cloneNode(true));
  document.getElementById('now')!.dataset['runningSince'] = started ? String(last.atS) : '';
  const since = doing.querySelector<HTMLElement>('[data-since]');
  if (since !== null) since.dataset['since'] = String(last.atS);
  tick();
}

/** How long the running sequence has been running, s. */
const ranS = () => nowS() - Number(document.getElementById('now')?.dataset['runningSince']);

const sequenceTaps = new Set(['started', 'clean', 'moved', 'hold failed', 'stopped']);

function show(html: string): void {
  if (holder === null) return;
  const focused = document.activeElement?.closest('form.tap')?.querySelector('button')?.textContent;
  const held = focused ?? tappedWords;
  holder.innerHTML = html;
  tick();
  if (held === '') return;
  const again = [...holder.querySelectorAll<HTMLButtonElement>('form.tap button')];
  // What was tapped may be gone: the reader is put before what comes next, not back to the top of the page.
  const place =
    again.find((b) => b.textContent === held) ?? holder.querySelector<HTMLElement>('h2, .headline');
  if (place === null) return;
  if (place.tagName !== 'BUTTON') place.tabIndex = -1;
  place.focus({ preventScroll: true });
}

document.addEventListener('submit', (event) => {
  const form = event.target as HTMLFormElement;
  if (!form.classList.contains('tap')) return;
  event.preventDefault();
  const fields = Object.fromEntries([...new FormData(form)].map(([k, v]) => [k, String(v)]));
  const words = form.querySelector('button')?.textContent ?? '';
  tappedWords = words;
  queue.push({
    tapId: crypto.randomUUID(),
    atS: nowS(),
    happening: happeningOf(fields, ranS()),
    words,
  });
  keep();
  for (const button of holder?.querySelectorAll<HTMLButtonElement>('button.huge') ?? [])
    button.disabled = true;
  void send();
});

function tick(): void {
  const leftS = Math.round(slotS - nowS());
  if (left !== null) {
    left.textContent = (leftS < 0 ? 'over by ' : '') + minSec(Math.abs(leftS));
    left.classList.toggle('risk', leftS < 120);
  }
  const since = document.querySelector<HTMLElement>('[data-since]');
  if (since !== null)
    since.textContent = minSec(Math.max(0, nowS() - Number(since.dataset['since'])));
}

const minSec = (s: number) =>
  `${Math.floor(s / 60)}:${String(Math.floor(s % 60)).padStart(2, '0')}`;

setInterval(tick, 1000);
tick();
keep();
const notKept = sessionStorage.getItem(refusedKey);
sessionStorage.removeItem(refusedKey);
if (notKept !== null && sending !== null)
  sending.textContent = `Not kept, because this exam takes no such tap any more: ${notKept}.`;
void send();
