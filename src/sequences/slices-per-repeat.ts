import type { Sequence } from './sequence.js';

/** Slices that one repeat can take: all interleaved, or as packages inverted together and read together. */
export function slicesThatFit(sequence: Sequence, slotMs: number, roomMs: number): number {
  const inversionMs = sequence.inversionTimeMs;
  if (inversionMs === undefined) return Math.floor(roomMs / slotMs + 1e-9);
  if (inversionMs + slotMs > roomMs + 1e-9) return 0;
  const together = Math.max(
    1,
    Math.min(Math.floor(inversionMs / slotMs), Math.floor((roomMs - inversionMs) / slotMs + 1e-9)),
  );
  const packageMs = inversionMs + together * slotMs;
  return together * Math.max(1, Math.floor(roomMs / packageMs + 1e-9));
}

/** Images made of every slice: averages, or for diffusion one without weighting and the weighted ones. */
export function imagesPerSlice(sequence: Sequence): number {
  if (sequence.family !== 'diffusion-epi') return sequence.averages;
  const weighted = sequence.bValuesSPerMm2.filter((b) => b > 0).length;
  return 1 + weighted * sequence.diffusionDirections * sequence.averages;
}
