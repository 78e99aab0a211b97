import type { RequestHandler } from 'express';
import { gradeMarks, gradeWords, type Grade } from '../exams/index.js';
import type { WebDeps } from './deps.js';
import { whoIs } from './who.js';

/** Letters inside the drawn marks; shape, border and words carry the meaning too. */
const markLetters: Readonly<Record<Grade, string>> = {
  diagnostic: 'D',
  targeted: 'T',
  screening: 's!',
  none: '–',
};

/** Values every page has: who is asking, the department, how grades are marked and said. */
export function pageLocals(deps: WebDeps): RequestHandler {
  return (request, response, next) => {
    Object.assign(response.locals, {
      who: whoIs(request),
      department: deps.department.name,
      firstDay: deps.department.days[0],
      path: request.path,
      fullUrl: request.originalUrl,
      gradeMarks,
      gradeWords,
      markLetters,
    });
    next();
  };
}
