/// <reference lib="dom" />
/** Sends taps in order, once, and keeps them through a lost connection, a reload or a server that restarts. */
interface QueuedTap {
  readonly tapId: string;
  readonly atS: number;
  readonly happening: Record<string, unknown>;
}

const holder = document.getElementById('console');
const clock = document.querySelector<HTMLElement>('.clock');
const left = document.getElementById('left');
const sending = document.getElementById('sending');
const booking = holder?.dataset['booking'] ?? '';
const storeKey = `stillspan-taps-${booking}`;
const retryMs = 1500;

const zeroMs = Number(clock?.dataset['zeroMs']);
const skewMs = Number(clock?.dataset['serverMs']) - Date.now();
const slotS = Number(clock?.dataset['slotS']);
const nowS = () => (Date.now() + skewMs - zeroMs) / 1000;

let queue: QueuedTap[] = stored();
let busy = false;

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
  const batch = [...queue];
  try {
    const answer = await fetch(`/console/${encodeURIComponent(booking)}/taps`, {
      method: 'POST',
      headers: { 'Content-Type': 'application/json' },
      body: JSON.stringify({ taps: batch }),
    });
    if (answer.status >= 500) throw new Error(String(answer.status));
    const sent = new Set(batch.map((t) => t.tapId));
    queue = queue.filter((t) => !sent.has(t.tapId));
    keep();
    if (answer.ok) show(await answer.text());
    else location.reload();
  } catch {
    setTimeout(() => void send(), retryMs);
  } finally {
    busy = false;
  }
  if (queue.length > 0) setTimeout(() => void send(), 0);
}

function show(html: string): void {
  if (holder === null) return;
  const focused = document.activeElement?.closest('form.tap')?.querySelector('button')?.textContent;
  holder.innerHTML = html;
  [...holder.querySelectorAll<HTMLButtonElement>('form.tap button')]
    .find((b) => b.textContent === focused)
    ?.focus();
  tick();
}

document.addEventListener('submit', (event) => {
  const form = event.target as HTMLFormElement;
  if (!form.classList.contains('tap')) return;
  event.preventDefault();
  const fields = Object.fromEntries([...new FormData(form)].map(([k, v]) => [k, String(v)]));
  queue.push({ tapId: crypto.randomUUID(), atS: nowS(), happening: happeningOf(fields) });
  keep();
  for (const button of holder?.querySelectorAll<HTMLButtonElement>('button.huge') ?? [])
    button.disabled = true;
  void send();
});

function happeningOf(fields: Readonly<Record<string, string>>): Record<string, unknown> {
  const kind = fields['kind'] ?? '';
  const since = Number(document.getElementById('now')?.dataset['runningSince']);
  const span = (name: string) =>
    fields[name] === undefined
      ? {}
      : { [name]: { kind: 'stated', seconds: seconds(fields[name]) } };
  switch (kind) {
    case 'started':
      return { kind, viewId: fields['view'], sequenceId: fields['sequence'] };
    case 'put first':
    case 'dropped':
      return { kind, viewId: fields['view'] };
    case 'hold failed':
      return { kind, afterS: Math.min(300, Math.max(0, nowS() - since)) };
    case 'undone':
      return { kind, taken: Number(fields['taken']) };
    case 'statement':
      return { kind, ...span('still'), ...span('hold') };
    default:
      return { kind };
  }
}

function seconds(text: string | undefined): number {
  if (text === undefined || text === 'none') return 0;
  return parseFloat(text) * (text.endsWith('min') ? 60 : 1);
}

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
void send();
