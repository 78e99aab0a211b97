/** Text that cannot become markup. */
export function escaped(text: string): string {
  return text.replace(/[&<>"']/g, (c) => `&#${c.charCodeAt(0)};`);
}

/** Rounded to a tenth of a unit of the picture. */
export const r = (value: number) => Math.round(value * 10) / 10;

/** What a picture says to those who do not see it. */
export interface PictureWords {
  readonly title: string;
  readonly description: string;
}

/** A whole SVG: drawn in the page's own ink, its words first, as wide as its place. */
export function picture(
  words: PictureWords,
  size: { readonly width: number; readonly height: number },
  parts: readonly string[],
): string {
  const { title, description } = words;
  return [
    `<svg viewBox="0 0 ${size.width} ${size.height}" role="img" aria-label="${escaped(`${title}. ${description}`)}" class="chart">`,
    `<title>${escaped(title)}</title><desc>${escaped(description)}</desc>`,
    ...parts,
    '</svg>',
  ].join('');
}

/** Ticks and their figures below a horizontal axis. */
export function ticksBelow(
  scale: { ticks(count: number): number[]; (value: number): number },
  count: number,
  y: number,
): readonly string[] {
  return scale
    .ticks(count)
    .map(
      (t) =>
        `<g transform="translate(${r(scale(t))},${r(y)})"><line y2="5" stroke="currentColor"/><text y="18" text-anchor="middle">${t}</text></g>`,
    );
}
