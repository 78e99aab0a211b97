/// <reference lib="dom" />
/** Shows how far a simulation is and opens its result when it ends. Without it the page reloads itself. */
const bar = document.getElementById('month-progress') as HTMLProgressElement | null;
const at = document.getElementById('month-at');
const everyMs = 500;

interface Progress {
  readonly state: string;
  readonly at: string;
  readonly percent: number;
}

async function look(): Promise<void> {
  try {
    const answer = await fetch(`${location.pathname}/progress`);
    // A server that was started anew does not know it: its page says so.
    if (answer.status === 404 || answer.status === 422) return location.reload();
    const { state, at: words, percent } = (await answer.json()) as Progress;
    if (state !== 'running') return location.reload();
    if (bar !== null) bar.value = percent;
    if (at !== null && at.textContent !== words) at.textContent = words;
  } catch {
    if (at !== null) at.textContent = 'The server does not answer; it is asked again.';
  }
  setTimeout(() => void look(), everyMs);
}

/** A page that waits for its own answer asks for itself again. */
const reloads = bar?.classList.contains('reload') === true;

if (reloads) setTimeout(() => location.reload(), everyMs);
else if (bar !== null) setTimeout(() => void look(), everyMs);
