import type { KSpaceOrder } from './kspace.js';

/** Where a line stands in the acquisition: its echo in the train and its shot, both from 0. */
export interface PlaceInTrain {
  readonly echo: number;
  readonly shot: number;
}

/**
 * Place of every acquired line, in the order of the lines. The lines are cut into as many bands as
 * the train has echoes, as equal as whole lines allow, so every echo is used and each band fits into the
 * shots there are.
 *
 * - linear: bands side by side across k-space, turned around the edge so that the middle of the wanted
 *   band lies on the centre;
 * - centric: bands by distance from the centre, both sides in turn;
 * - single-shot: a band a line, from the first line to the last.
 *
 * @param count acquired lines
 * @param rankOfCentre index of the centre line among them
 * @param train echoes per shot, at most `count`
 * @param wantedEcho echo wanted on the centre line (linear alone); absent: one plain sweep, not turned
 */
export function placesInTrain(
  order: KSpaceOrder,
  count: number,
  rankOfCentre: number,
  train: number,
  wantedEcho?: number,
): PlaceInTrain[] {
  const echoAt = (place: number) => Math.floor((place * train) / count);
  const firstOf = (echo: number) => Math.ceil((echo * count) / train);
  let turn = 0;
  if (wantedEcho !== undefined) {
    const atCentre = Math.max(0, Math.min(train - 1, wantedEcho));
    const middle = (firstOf(atCentre) + firstOf(atCentre + 1)) >> 1;
    turn = middle - rankOfCentre + count;
  }
  const placeOf = (rank: number): number => {
    if (order === 'single-shot') return rank;
    if (order === 'linear') return (rank + turn) % count;
    return placeByDistance(rank, rankOfCentre, count);
  };
  return Array.from({ length: count }, (_, rank) => {
    const place = placeOf(rank);
    const echo = echoAt(place);
    return { echo, shot: place - firstOf(echo) };
  });
}

/** Centre first, then outwards in turn; where one side has ended, the other goes on alone. */
function placeByDistance(rank: number, centre: number, count: number): number {
  const after = count - 1 - centre;
  const distance = Math.abs(rank - centre);
  const both = Math.min(centre, after);
  if (rank === centre) return 0;
  if (distance > both) return both + distance;
  return 2 * distance - (rank > centre ? 1 : 0);
}
