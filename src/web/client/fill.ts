/// <reference lib="dom" />
/**
 * On the form: the search becomes one that is watched, with a length to choose. On a running search: shows how far it is and
 * what it has, and opens the proposal when it ends. Without this the form asks for a proposal in one go.
 */
const form = document.getElementById('fill-form') as HTMLFormElement | null;
const lengthField = document.getElementById('fill-length');
const heading = document.getElementById('fill-heading');
const bar = document.getElementById('fill-progress') as HTMLProgressElement | null;
const said = document.getElementById('fill-words');
const everyMs = 400;

interface Progress {
  readonly state: string;
  readonly percent: number;
  readonly heading: string;
  readonly words: string;
}

if (form !== null && lengthField !== null) {
  form.method = 'post';
  form.action = '/fill/searches';
  lengthField.hidden = false;
  const select = lengthField.querySelector('select');
  if (select !== null) select.disabled = false;
}

async function look(): Promise<void> {
  try {
    const answer = await fetch(`${location.pathname}/progress`);
    if (answer.status === 404 || answer.status === 422) return location.reload();
    const now = (await answer.json()) as Progress;
    if (now.state !== 'running') return location.reload();
    if (bar !== null) bar.value = now.percent;
    write(heading, now.heading);
    write(said, now.words);
  } catch {
    write(said, 'The server does not answer; it is asked again.');
  }
  setTimeout(() => void look(), everyMs);
}

/** Only what is new is written: a screen reader says every change aloud. */
function write(where: HTMLElement | null, words: string): void {
  if (where !== null && where.textContent !== words) where.textContent = words;
}

if (bar !== null) setTimeout(() => void look(), everyMs);
