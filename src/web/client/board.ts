/// <reference lib="dom" />
/** Keeps an open board live, and lets a pointer drag a booking. Everything also works without it. */
import { draggable } from './drag.js';

const board = (): HTMLElement | null => document.getElementById('board');
const live = document.getElementById('live');

let dragging = false;
let missed = false;

async function refresh(): Promise<void> {
  const current = board();
  const date = current?.dataset['date'];
  if (current === null || date === undefined) return;
  if (dragging) {
    missed = true;
    return;
  }
  const answer = await fetch(`/day/${date}/board`, { headers: { Accept: 'text/html' } });
  if (!answer.ok) return;
  const focused =
    document.activeElement instanceof HTMLAnchorElement
      ? document.activeElement.getAttribute('href')
      : null;
  const inside = current.contains(document.activeElement);
  const scrolled = current.scrollLeft;
  const holder = document.createElement('div');
  holder.innerHTML = await answer.text();
  const next = holder.querySelector('#board');
  if (next === null) return;
  current.replaceWith(next);
  next.scrollLeft = scrolled;
  if (inside && focused !== null) {
    [...next.querySelectorAll<HTMLAnchorElement>('a')]
      .find((a) => a.getAttribute('href') === focused)
      ?.focus();
  }
}

const events = new EventSource('/live');
let wasLost = false;
events.addEventListener('change', () => void refresh());
events.addEventListener('error', () => {
  wasLost = true;
  document.body.dataset['live'] = 'lost';
});
events.addEventListener('open', () => {
  document.body.dataset['live'] = 'on';
  if (wasLost) void refresh();
  wasLost = false;
});

draggable({
  board,
  say: (text) => {
    if (live !== null) live.textContent = text;
  },
  begun: () => {
    dragging = true;
  },
  ended: () => {
    dragging = false;
    if (missed) {
      missed = false;
      void refresh();
    }
  },
});

if (location.hash === '#panel' || new URLSearchParams(location.search).has('booking')) {
  document.getElementById('panel')?.focus({ preventScroll: true });
}
