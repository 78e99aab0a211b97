import { sequenceAt, viewsOfSequence, type SiteLibrary } from '../../exams/index.js';
import { headPhantom } from '../../physics/index.js';
import { previewInput, type Sequence } from '../../sequences/index.js';
import { shownMovement } from '../preview-image.js';

/** One simulated picture of the side-by-side row. */
export interface ComparedPicture {
  readonly src: string;
  readonly caption: string;
}

const movementWords = `shifts by ${Math.round(Math.hypot(shownMovement.shiftXMm, shownMovement.shiftYMm))} mm and turns by ${shownMovement.turnDeg} degrees half-way`;

/**
 * Full quality, this or the fallback, and full quality when the patient moves; none for sequences of other
 * regions than the phantom's, or whose full quality is not simulated.
 */
export function comparedPictures(
  sequence: Sequence,
  library: SiteLibrary,
): readonly ComparedPicture[] {
  const served = viewsOfSequence(library, sequence.id);
  const full = fullQualityOf(sequence, library);
  if (!served.some(({ exam }) => exam.region === 'head') || !isDrawn(full)) return [];
  const fallback = sequence.id === full.id ? fallbackOf(full, library) : sequence;
  return [
    { src: addressOf(full, false), caption: `Full quality: ${full.name}` },
    ...(fallback !== undefined && isDrawn(fallback)
      ? [{ src: addressOf(fallback, false), caption: `Fallback: ${fallback.name}` }]
      : []),
    {
      src: addressOf(full, true),
      caption: `Full quality if the patient ${movementWords}: ${full.name}`,
    },
  ];
}

/**
 * What a sequence is measured against: itself where some view takes it for full quality, else the full
 * quality of a view with the same slices, so that only the acquisition differs.
 */
export function fullQualityOf(sequence: Sequence, library: SiteLibrary): Sequence {
  const references = viewsOfSequence(library, sequence.id).map(({ view }) => view.reference);
  if (references.includes(sequence.id)) return sequence;
  const found = references.flatMap((id) => sequenceAt(library, id, sequence.fieldT) ?? []);
  return (
    found.find((s) => s.sliceThicknessMm === sequence.sliceThicknessMm) ?? found[0] ?? sequence
  );
}

/** The single-shot a view would fall back to. */
function fallbackOf(full: Sequence, library: SiteLibrary): Sequence | undefined {
  return viewsOfSequence(library, full.id)
    .filter(({ view }) => view.reference === full.id)
    .flatMap(({ view }) => view.candidates)
    .map((id) => sequenceAt(library, id, full.fieldT))
    .find((s) => s?.family === 'single-shot');
}

const isDrawn = (s: Sequence) => previewInput(s, headPhantom, 0).kind === 'scan';

const addressOf = (s: Sequence, moved: boolean) =>
  `/library/sequences/${s.id}/picture.png?field=${s.fieldT}${moved ? '&moved=1' : ''}`;
