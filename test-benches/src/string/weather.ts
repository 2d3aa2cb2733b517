import type { SeededRandom } from '../kit/seeded-random.js';
import { brokenCloud, ramps, rampTests, steadyLight, type Irradiance } from './irradiance.js';
import { modulesInString } from './string-physics.js';

export const profiles = ['steady', 'ramps-low', 'ramps-high', 'cloud', 'shade'] as const;
export type Profile = (typeof profiles)[number];

/** What light falls on the string. */
export interface Weather {
  /** In full light, W/m². */
  irradiance: Irradiance;
  /** Share of it that so many modules get. */
  shades: readonly { share: number; modules: number }[];
}

const evenly = [{ share: 1, modules: modulesInString }];

/** @param random used up by the profiles that hang on chance */
export function weatherOf(profile: Profile, random: SeededRandom): Weather {
  switch (profile) {
    case 'steady':
      return { irradiance: steadyLight(800), shades: evenly };
    case 'ramps-low':
      return { irradiance: ramps(rampTests['low-to-medium']), shades: evenly };
    case 'ramps-high':
      return { irradiance: ramps(rampTests['medium-to-high']), shades: evenly };
    case 'cloud':
      return { irradiance: brokenCloud(random), shades: evenly };
    case 'shade':
      return { irradiance: steadyLight(900), shades: partialShade(random) };
  }
}

/** A shadow over one to four of the six modules, over one of them deeper: two or three peaks. */
function partialShade(random: SeededRandom): Weather['shades'] {
  const shaded = 1 + Math.floor(4 * random.uniform());
  const share = 0.3 + 0.35 * random.uniform();
  const isDeeper = shaded > 1 && random.uniform() < 0.5;
  const light = { share: 1, modules: modulesInString - shaded };
  if (!isDeeper) return [light, { share, modules: shaded }];
  return [light, { share, modules: shaded - 1 }, { share: share / 2, modules: 1 }];
}

const shadow = { modules: 2, share: 0.4 };

/** The same light with a shadow over two of the modules that stood in the most of it; over one where it is one. */
export function withShadow([light, ...others]: Weather['shades']): Weather['shades'] {
  if (!light) return others;
  const modules = Math.min(shadow.modules, light.modules);
  const left = { share: light.share, modules: light.modules - modules };
  const shaded = { share: light.share * shadow.share, modules };
  return left.modules > 0 ? [left, shaded, ...others] : [shaded, ...others];
}
