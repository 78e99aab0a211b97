/** Static field strengths the tool knows, tesla. */
export type FieldT = 1.5 | 3;
