import { uniformFloat64 } from 'pure-rand/distribution/uniformFloat64';
import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus';

/** Uniform numbers in [0, 1), 53 bits each. */
export type RandomStream = () => number;

/**
 * A stream of its own for one source of chance. The same seed and name give the same numbers wherever and whenever they
 * are asked for; another name gives others, so drawing more from one source never shifts what another one gives.
 *
 * xoroshiro128+ (Blackman and Vigna 2018) by pure-rand. Its raw 32-bit seeds start near each other, so seed and name
 * are mixed first (FNV-1a over both, finished as in MurmurHash3), then the generator jumps 2^64 numbers ahead.
 *
 * @param seed whole number, 0 to 2^53
 */
export function randomStream(seed: number, name: string): RandomStream {
  const generator = xoroshiro128plus(mixed(seed, name));
  generator.jump();
  return () => uniformFloat64(generator);
}

function mixed(seed: number, name: string): number {
  let hash = 0x811c9dc5;
  for (const char of `${seed}/${name}`) {
    hash = Math.imul(hash ^ (char.codePointAt(0) ?? 0), 0x01000193);
  }
  hash = Math.imul(hash ^ (hash >>> 16), 0x85ebca6b);
  hash = Math.imul(hash ^ (hash >>> 13), 0xc2b2ae35);
  return hash ^ (hash >>> 16);
}
