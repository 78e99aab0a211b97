/**
 * What was tapped, as the log keeps it.
 *
 * @param ranS how long the running sequence has been running, s; a failed hold is dated by it
 */
export function happeningOf(
  fields: Readonly<Record<string, string>>,
  ranS: number,
): Record<string, unknown> {
  const kind = fields['kind'] ?? '';
  const span = (name: string) =>
    fields[name] === undefined
      ? {}
      : { [name]: { kind: 'stated', seconds: seconds(fields[name]) } };
  switch (kind) {
    case 'started':
      return { kind, viewId: fields['view'], sequenceId: fields['sequence'] };
    case 'put first':
    case 'dropped':
      return { kind, viewId: fields['view'] };
    case 'hold failed':
      return { kind, afterS: Math.min(300, Math.max(0, ranS)) };
    case 'undone':
      return { kind, taken: Number(fields['taken']) };
    case 'statement':
      return { kind, ...span('still'), ...span('hold') };
    default:
      return { kind };
  }
}

function seconds(text: string | undefined): number {
  if (text === undefined || text === 'none') return 0;
  return parseFloat(text) * (text.endsWith('min') ? 60 : 1);
}
