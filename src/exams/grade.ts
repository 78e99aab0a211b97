/** What an answer is worth, per clinical question, worst first. */
export const grades = ['none', 'screening', 'targeted', 'diagnostic'] as const;
export type Grade = (typeof grades)[number];

/** 0 none, 1 screening, 2 targeted, 3 diagnostic. */
export type GradeRank = 0 | 1 | 2 | 3;

export const rankOf = (grade: Grade): GradeRank => grades.indexOf(grade) as GradeRank;
export const gradeOf = (rank: GradeRank): Grade => grades[rank];

/** The words that must stand beside a grade wherever it appears: page, paper, export, log, JSON. */
export const gradeWords: Readonly<Record<Grade, string>> = {
  diagnostic: 'diagnostic',
  targeted: 'targeted: this question only, not diagnostic for anything else',
  screening: 'screening-grade, not diagnostic',
  none: 'not answered',
};

/** Marks that survive greyscale, colour blindness and plain text. */
export const gradeMarks: Readonly<Record<Grade, string>> = {
  diagnostic: '[D]',
  targeted: '[T]',
  screening: '[s!]',
  none: '[ - ]',
};

/** Levels a measured figure must reach for a grade. */
export interface GradeLevels {
  readonly diagnostic: number;
  readonly targeted: number;
  readonly screening: number;
}

/** Grade of a figure where more is better. */
export function gradeAtLeast(value: number, levels: GradeLevels): Grade {
  if (value >= levels.diagnostic) return 'diagnostic';
  if (value >= levels.targeted) return 'targeted';
  if (value >= levels.screening) return 'screening';
  return 'none';
}

/** Grade of a figure where less is better. */
export function gradeAtMost(value: number, levels: GradeLevels): Grade {
  if (value <= levels.diagnostic) return 'diagnostic';
  if (value <= levels.targeted) return 'targeted';
  if (value <= levels.screening) return 'screening';
  return 'none';
}

/** One reason that bears on a grade: its number, its limit, and a sentence anybody understands. */
export interface GradeFactor {
  readonly kind:
    'catalogue' | 'family' | 'weighting' | 'limits' | 'contrast-to-noise' | 'border' | 'movement';
  readonly grade: Grade;
  readonly value?: number;
  readonly limit?: number;
  readonly unit?: string;
  readonly sentence: string;
  readonly source: string;
}

export interface GradedAnswer {
  readonly grade: Grade;
  readonly factors: readonly GradeFactor[];
}

/** The lowest factor wins; with no factor at all there is no grade. */
export function lowestGrade(factors: readonly GradeFactor[]): GradedAnswer {
  if (factors.length === 0) return { grade: 'none', factors };
  const rank = Math.min(...factors.map((f) => rankOf(f.grade))) as GradeRank;
  return { grade: gradeOf(rank), factors };
}

/** The factors that hold a grade down, the ones to explain first. */
export function decidingFactors(answer: GradedAnswer): readonly GradeFactor[] {
  return answer.factors.filter((f) => f.grade === answer.grade);
}
