/// <reference lib="dom" />

interface Dragging {
  readonly board: () => HTMLElement | null;
  readonly say: (text: string) => void;
  readonly begun: () => void;
  readonly ended: () => void;
}

const stepMin = 5;
const thresholdPx = 6;

/** Dragging a booking up, down or to another scanner; near its lower edge it is made longer or shorter. Escape gives up. */
export function draggable({ board, say, begun, ended }: Dragging): void {
  document.addEventListener('pointerdown', (down) => {
    if (down.button !== 0 || down.pointerType === 'touch') return;
    const block = (down.target as Element | null)?.closest<HTMLElement>('.block.booking');
    const lane = block?.parentElement;
    const whole = board();
    if (!block || !lane || whole === null || block.classList.contains('over')) return;
    const fromMin = Number(whole.dataset['from']);
    const minutesShown = Number(whole.dataset['to']) - fromMin;
    const pxPerMin = lane.clientHeight / minutesShown;
    const rect = block.getBoundingClientRect();
    const resizing = rect.bottom - down.clientY < 8;
    const startedMin = fromMin + block.offsetTop / pxPerMin;
    const minutes = Number(block.dataset['minutes']);
    let moved = false;
    let place = {
      scanner: lane.dataset['scanner'] ?? '',
      startMin: Math.round(startedMin),
      minutes,
    };

    const follow = (move: PointerEvent) => {
      const dy = move.clientY - down.clientY;
      if (!moved && Math.hypot(dy, move.clientX - down.clientX) < thresholdPx) return;
      if (!moved) begun();
      moved = true;
      block.classList.add('dragging');
      const delta = Math.round(dy / pxPerMin / stepMin) * stepMin;
      const over = document
        .elementsFromPoint(move.clientX, move.clientY)
        .find((e) => e.classList.contains('lane')) as HTMLElement | undefined;
      if (resizing)
        place = {
          ...place,
          minutes: Math.max(stepMin, Math.round((minutes + delta) / stepMin) * stepMin),
        };
      else
        place = {
          ...place,
          startMin: Math.round((startedMin + delta) / stepMin) * stepMin,
          scanner: over?.dataset['scanner'] ?? place.scanner,
        };
      block.style.top = `${(100 * (place.startMin - fromMin)) / minutesShown}%`;
      block.style.height = `${(100 * place.minutes) / minutesShown}%`;
      if (!resizing && over !== undefined && over !== block.parentElement) over.append(block);
      say(`${clock(place.startMin)} to ${clock(place.startMin + place.minutes)}`);
    };
    const stop = () => {
      document.removeEventListener('pointermove', follow);
      document.removeEventListener('pointerup', drop);
      document.removeEventListener('keydown', giveUp);
      block.classList.remove('dragging');
      if (moved) ended();
    };
    const giveUp = (key: KeyboardEvent) => {
      if (key.key !== 'Escape') return;
      stop();
      location.reload();
    };
    const drop = () => {
      stop();
      if (!moved) return;
      block.addEventListener('click', (click) => click.preventDefault(), { once: true });
      submit(`/bookings/${block.dataset['booking']}/move`, {
        version: block.dataset['version'] ?? '',
        scanner: place.scanner,
        start: clock(place.startMin),
        slot: String(place.minutes),
      });
    };
    document.addEventListener('pointermove', follow);
    document.addEventListener('pointerup', drop);
    document.addEventListener('keydown', giveUp);
  });
  document.addEventListener('dragstart', (event) => {
    if ((event.target as Element | null)?.closest('.block') !== null) event.preventDefault();
  });
}

/** A real form post, so that the answer is the page that a form without script would give. */
function submit(action: string, fields: Readonly<Record<string, string>>): void {
  const form = document.createElement('form');
  form.method = 'post';
  form.action = action;
  for (const [name, value] of Object.entries(fields)) {
    const input = document.createElement('input');
    input.type = 'hidden';
    input.name = name;
    input.value = value;
    form.append(input);
  }
  document.body.append(form);
  form.submit();
}

function clock(minutes: number): string {
  const whole = Math.max(0, Math.round(minutes));
  return `${String(Math.floor(whole / 60)).padStart(2, '0')}:${String(whole % 60).padStart(2, '0')}`;
}
