import { noSignal, type Phantom, type Region } from './phantom.js';

const ellipse = (
  tissue: string,
  over: string,
  [xMm, yMm]: readonly [number, number],
  [halfXMm, halfYMm]: readonly [number, number],
  turnDeg = 0,
): Region => ({ tissue, over, xMm, yMm, halfXMm, halfYMm, turnDeg });

const lesion = (diameterMm: number, place: readonly [number, number]): Region =>
  ellipse('oedema-like lesion', 'white matter', place, [diameterMm / 2, diameterMm / 2]);

/**
 * Axial slice of a head at the lateral ventricles; the forehead is up. Sizes are ours, of the order of
 * an adult's head (assumption). It carries what the grades speak of: lesions of 4, 6, 10 and 15 mm in white
 * matter, an infarct of 12 mm, ventricles, and a catheter of 2.6 mm in one of them.
 */
export const headPhantom: Phantom = {
  name: 'simulated head',
  regions: [
    ellipse('fat', noSignal, [0, 0], [74, 93]),
    ellipse(noSignal, 'fat', [0, 0], [69, 88]),
    ellipse('csf', noSignal, [0, 0], [65, 84]),
    ellipse('grey matter', 'csf', [0, 0], [63, 82]),
    ellipse('white matter', 'grey matter', [0, 0], [58, 77]),
    ellipse('csf', 'white matter', [-11, -4], [6.5, 24], 12),
    ellipse('csf', 'white matter', [11, -4], [6.5, 24], -12),
    ellipse('catheter', 'csf', [11, -4], [1.3, 1.3]),
    ellipse('grey matter', 'white matter', [-28, 2], [7, 16], 10),
    ellipse('grey matter', 'white matter', [28, 2], [7, 16], -10),
    lesion(4, [-36, -32]),
    lesion(6, [36, -32]),
    lesion(10, [-34, 36]),
    lesion(15, [33, 38]),
    ellipse('acute infarct', 'white matter', [-47, 4], [6, 6]),
  ],
};
