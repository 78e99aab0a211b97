/**
 * Mean k-space weight along a diameter for rotating blades: the point at radius r is covered by every
 * blade whose half width exceeds r |sin(angle)|, each time by the line it lies on, so its weight is the
 * mean echo over those lines (geometry of rotating blades: Pipe 1999; averaging over angles is ours,
 * isotropic by construction). Lines of a blade are ordered linearly, the blade's centre in the middle.
 *
 * @param echoes amplitude of each echo of one blade
 * @param lines lines across the disc
 * @returns weights of `lines` positions, centre at floor(lines / 2)
 */
export function radialWeights(echoes: Float64Array, lines: number): Float64Array {
  const width = echoes.length;
  const centre = Math.floor(lines / 2);
  const angles = 180;
  return Float64Array.from({ length: lines }, (_, line) => {
    const radius = Math.abs(line - centre);
    let sum = 0;
    let hits = 0;
    for (let step = 0; step < angles; step++) {
      const offset = radius * Math.sin((Math.PI * (step + 0.5)) / angles - Math.PI / 2);
      const index = Math.floor(offset + width / 2);
      if (index < 0 || index >= width) continue;
      sum += echoes[index] ?? 0;
      hits += 1;
    }
    return hits > 0 ? sum / hits : (echoes[Math.floor(width / 2)] ?? 0);
  });
}
