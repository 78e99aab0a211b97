/// <reference lib="dom" />
/** Keeps the plan beside the form in step with the answers. Without it the button "Show the plan" does the same. */
const form = document.getElementById('request-form') as HTMLFormElement | null;
const planHere = document.getElementById('plan-here');
const questionsHere = document.getElementById('questions-here');
const status = document.getElementById('look-status');

const waitMs = 120;
let timer: ReturnType<typeof setTimeout> | undefined;
let asked = 0;
const examField = form?.elements.namedItem('exam') as HTMLSelectElement | null | undefined;
/** The exam whose questions the page came with: something else may have been chosen before this script ran. */
let shownExam = examField?.querySelector<HTMLOptionElement>('option[selected]')?.value ?? '';

async function look(): Promise<void> {
  if (form === null || planHere === null || questionsHere === null) return;
  const number = ++asked;
  const body = new URLSearchParams();
  for (const [name, value] of new FormData(form))
    if (typeof value === 'string') body.append(name, value);
  try {
    const answer = await fetch('/requests/look', { method: 'POST', body });
    if (number !== asked) return; // a newer answer is on its way
    if (!answer.ok) throw new Error(String(answer.status));
    const holder = document.createElement('div');
    holder.innerHTML = await answer.text();
    const open = new Set(
      [...planHere.querySelectorAll('details[open]')].map(
        (d) => d.closest('li')?.querySelector('strong')?.textContent,
      ),
    );
    planHere.replaceChildren(...(holder.querySelector('[data-part="plan"]')?.childNodes ?? []));
    for (const details of planHere.querySelectorAll('details')) {
      if (open.has(details.closest('li')?.querySelector('strong')?.textContent))
        details.open = true;
    }
    const exam = examField?.value ?? '';
    if (exam !== shownExam) {
      shownExam = exam;
      questionsHere.replaceChildren(
        ...(holder.querySelector('[data-part="questions"]')?.childNodes ?? []),
      );
    }
    if (status !== null) status.textContent = '';
    document.body.dataset['look'] = String(number);
  } catch {
    if (number === asked && status !== null)
      status.textContent =
        'The plan could not be brought up to date. Your answers are kept; it tries again with the next one.';
  }
}

function soon(): void {
  clearTimeout(timer);
  timer = setTimeout(() => void look(), waitMs);
}

form?.addEventListener('input', (event) => {
  const field = event.target as HTMLInputElement;
  if (field.classList.contains('other')) {
    const radio = form.querySelector<HTMLInputElement>(
      `input[type="radio"][name="${field.name.replace(/_other$/, '')}"][value="other"]`,
    );
    if (radio !== null) radio.checked = true;
  }
  soon();
});

if (examField && examField.value !== shownExam) soon();
