/** A cell of words; one that a spreadsheet would take for a formula gets an apostrophe before it. */
export const quoted = (text: string) =>
  `"${(/^[=+\-@\t\r]/.test(text) ? `'${text}` : text).replaceAll('"', '""')}"`;
