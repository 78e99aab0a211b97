import { Router } from 'express';
import { sequenceAt } from '../../exams/index.js';
import type { WebDeps } from '../deps.js';
import { pictureOf, type Picture } from '../preview-image.js';
import { fieldOf } from '../field-asked.js';
import { fullQualityOf } from '../view-models/compared-pictures.js';

const mostPictures = 300;

/** Simulated pictures as PNG, worked out once each and kept. `?field=1.5`, `?moved=1`. */
export function previewRoutes(deps: WebDeps): Router {
  const router = Router();
  const { library } = deps.ground;
  const pictures = new Map<string, Picture>();

  router.get('/library/sequences/:id/picture.png', (request, response, next) => {
    const fieldT = fieldOf(request.query['field']);
    const sequence = sequenceAt(library, request.params.id, fieldT);
    if (sequence === undefined) return next();
    const moved = request.query['moved'] === '1';
    const key = `${sequence.id}|${fieldT}|${moved}`;
    let picture = pictures.get(key);
    if (picture === undefined) {
      picture = pictureOf(sequence, fullQualityOf(sequence, library), moved, Math.random);
      if (pictures.size >= mostPictures) pictures.clear();
      pictures.set(key, picture);
    }
    if (picture.kind === 'not drawn') return next();
    response.set('Cache-Control', 'max-age=3600').type('png').send(Buffer.from(picture.png));
  });
  return router;
}
