/**
 * A duration as people write it: a number with its unit, "20 min", "12 s", "1 h", "1.5 min".
 * A bare number is refused, because minutes taken for seconds would plan a wrong exam.
 *
 * @returns seconds, or undefined when it cannot be read without guessing
 */
export function parseDurationS(text: string): number | undefined {
  const match =
    /^(\d+(?:[.,]\d+)?)\s*(s|sec|secs|second|seconds|min|mins|minute|minutes|h|hr|hour|hours)\.?$/i.exec(
      text.trim(),
    );
  if (match === null) return undefined;
  const value = Number((match[1] ?? '').replace(',', '.'));
  const unit = (match[2] ?? '').toLowerCase();
  const seconds = unit.startsWith('s') ? value : unit.startsWith('m') ? value * 60 : value * 3600;
  return Number.isFinite(seconds) ? seconds : undefined;
}
