import { Router } from 'express';
import type { WebDeps } from '../deps.js';
import { fieldOf } from '../field-asked.js';
import { comparedPictures } from '../view-models/compared-pictures.js';
import { examPage } from '../view-models/exam-page.js';
import { libraryPage } from '../view-models/library-page.js';
import { sequencePage } from '../view-models/sequence-page.js';
import { previewRoutes } from './preview.js';

/** The site library: exams, sequences, and each sequence worked out with its simulated pictures. */
export function libraryRoutes(deps: WebDeps): Router {
  const router = Router();
  const { library } = deps.ground;
  const lists = libraryPage(library);
  router.use(previewRoutes(deps));

  router.get('/library', (_request, response) => {
    response.render('library', { title: 'Library', page: lists });
  });

  router.get('/library/exams/:id', (request, response, next) => {
    const exam = library.exams.get(request.params.id);
    if (exam === undefined) return next();
    response.render('exam', { title: exam.name, page: examPage(exam, library) });
  });

  router.get('/library/sequences/:id', (request, response, next) => {
    const fields = library.sequences.get(request.params.id);
    const sequence =
      fields?.get(fieldOf(request.query['field'])) ?? [...(fields?.values() ?? [])][0];
    if (fields === undefined || sequence === undefined) return next();
    response.render('sequence', {
      title: `${sequence.name}, ${sequence.fieldT} T`,
      sequence,
      fields: [...fields.keys()],
      page: sequencePage(sequence, library),
      pictures: comparedPictures(sequence, library),
    });
  });
  return router;
}
