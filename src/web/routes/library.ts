import { Router } from 'express';
import {
  catalogueRule,
  gradeWords,
  sequenceAt,
  viewsOfSequence,
  type Exam,
} from '../../exams/index.js';
import type { FieldT } from '../../physics/index.js';
import {
  families,
  familyWords,
  scanTime,
  untroubledBreathing,
  type Sequence,
} from '../../sequences/index.js';
import type { WebDeps } from '../deps.js';
import { pictureOf, type Picture } from '../preview-image.js';
import { sequencePage } from '../view-models/sequence-page.js';

const mostPictures = 300;

/** The site library: exams, sequences worked out, and their simulated pictures. */
export function libraryRoutes(deps: WebDeps): Router {
  const router = Router();
  const { library } = deps.ground;
  const pictures = new Map<string, Picture>();

  router.get('/library', (_request, response) => {
    response.render('library', {
      title: 'Library',
      exams: [...library.exams.values()],
      sequences: [...library.sequences.values()].map((fields) => listed(fields)),
    });
  });

  router.get('/library/exams/:id', (request, response, next) => {
    const exam = library.exams.get(request.params.id);
    if (exam === undefined) return next();
    response.render('exam', { title: exam.name, exam, rules: rulesOf(exam), familyWords });
  });

  router.get('/library/sequences/:id', (request, response, next) => {
    const fields = library.sequences.get(request.params.id);
    const sequence =
      fields?.get(fieldOf(request.query['field'])) ?? [...(fields?.values() ?? [])][0];
    if (fields === undefined || sequence === undefined) return next();
    const shown = comparedWith(sequence);
    response.render('sequence', {
      title: `${sequence.name}, ${sequence.fieldT} T`,
      sequence,
      fields: [...fields.keys()],
      page: sequencePage(sequence, library),
      pictures: shown,
    });
  });

  router.get('/library/sequences/:id/picture.png', (request, response, next) => {
    const fieldT = fieldOf(request.query['field']);
    const sequence = sequenceAt(library, request.params.id, fieldT);
    const reference =
      sequenceAt(library, String(request.query['scale'] ?? request.params.id), fieldT) ?? sequence;
    if (sequence === undefined || reference === undefined) return next();
    const moved = request.query['moved'] === '1';
    const key = `${sequence.id}|${reference.id}|${fieldT}|${moved}`;
    let picture = pictures.get(key);
    if (picture === undefined) {
      picture = pictureOf(sequence, reference, moved, Math.random);
      if (pictures.size >= mostPictures) pictures.clear();
      pictures.set(key, picture);
    }
    if (picture.kind === 'not drawn') return next();
    response.set('Cache-Control', 'max-age=3600').type('png').send(Buffer.from(picture.png));
  });

  /** Full quality, this or the fallback, and full quality when the patient moves. */
  function comparedWith(sequence: Sequence) {
    // The view whose full quality has the same slices, so that only the acquisition differs.
    const views = viewsOfSequence(library, sequence.id).map(({ view }) => view);
    const alike = (v: (typeof views)[number]) =>
      sequenceAt(library, v.reference, sequence.fieldT)?.sliceThicknessMm ===
      sequence.sliceThicknessMm;
    const view = views.find(alike) ?? views[0];
    const full = (view && sequenceAt(library, view.reference, sequence.fieldT)) ?? sequence;
    const fallback =
      sequence.id !== full.id
        ? sequence
        : view?.candidates
            .map((id) => sequenceAt(library, id, sequence.fieldT))
            .find((s) => s?.family === 'single-shot');
    if (!sequence.id.startsWith('head-') || !drawn(full)) return [];
    const address = (s: Sequence, moved: boolean) =>
      `/library/sequences/${s.id}/picture.png?field=${s.fieldT}&scale=${full.id}${moved ? '&moved=1' : ''}`;
    return [
      { src: address(full, false), caption: `Full quality: ${full.name}` },
      ...(fallback !== undefined && drawn(fallback)
        ? [{ src: address(fallback, false), caption: `Fallback: ${fallback.name}` }]
        : []),
      {
        src: address(full, true),
        caption: `Full quality if the patient moves half-way: ${full.name}`,
      },
    ];
  }

  function rulesOf(exam: Exam) {
    return exam.questions.map((question) => ({
      question,
      rules: families.map((family) => {
        const rule = catalogueRule(library.policy, exam.id, question.id, family);
        return {
          family: familyWords[family],
          grade: rule.atMost,
          words: gradeWords[rule.atMost],
          entry: rule.entry,
          basis: rule.basis,
        };
      }),
    }));
  }

  return router;
}

const drawn = (s: Sequence) =>
  s.family === 'spin-echo' || s.family === 'fast-spin-echo' || s.family === 'single-shot';

const fieldOf = (value: unknown): FieldT => (value === '1.5' ? 1.5 : 3);

function listed(fields: ReadonlyMap<FieldT, Sequence>) {
  const [first] = [...fields.values()];
  return {
    id: first?.id ?? '',
    name: first?.name ?? '',
    family: first?.family ?? '',
    weighting: first?.weighting ?? '',
    basis: first?.basis ?? '',
    at: [...fields].map(([fieldT, sequence]) => {
      const time = scanTime(sequence, untroubledBreathing);
      const seconds = time.kind === 'possible' ? Math.round(time.acquisitionS) : 0;
      return {
        fieldT,
        time:
          time.kind === 'possible'
            ? `${Math.floor(seconds / 60)}:${String(seconds % 60).padStart(2, '0')}`
            : 'cannot run',
      };
    }),
  };
}
