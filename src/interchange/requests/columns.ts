/** The columns of a request list, in the order a spreadsheet shows them. The same keys name the fields of JSON. */
export const requestColumns = [
  'request_id',
  'exam',
  'questions',
  'priority',
  'due_date',
  'patient_class',
  'age_years',
  'still_for',
  'hold_breath_for',
  'stay_for',
  'said_by',
  'follows_instructions',
  'conditions',
  'contrast',
  'safety_screening',
  'transport',
  'escort',
  'scanner',
  'start',
  'slot',
  'can_come_from',
  'can_come_until',
  'can_come_part',
  'b1rms_limit_microtesla',
  'note',
] as const;
export type RequestColumn = (typeof requestColumns)[number];

/** Without these a row cannot be planned. */
export const neededColumns: readonly RequestColumn[] = ['request_id', 'exam', 'slot'];

/** One row as it came: text per column, lists already joined by ";" where they came as arrays. */
export type RawRow = Readonly<Partial<Record<RequestColumn, string>>>;
