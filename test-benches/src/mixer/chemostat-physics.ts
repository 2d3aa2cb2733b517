/**
 * Continuous culture in a stirred tank. Textbook mass balances; concentrations in g/L, rates in 1/h.
 */

/** Kinetics of one culture. */
export interface Kinetics {
  /** μm, 1/h. */
  growthMax: number;
  /** Ks, g/L. */
  halfSaturation: number;
  /** Ki of Haldane, g/L; Infinity for Monod. */
  inhibition: number;
  /** Y, g of biomass per g of substrate. */
  yield: number;
}

/** What is fed to a tank. */
export interface Feed {
  /** S0, g/L. */
  substrate: number;
  /** Biomass that the feed brings along, g/L: settled and given back. */
  biomass: number;
}

/**
 * Specific growth rate, 1/h: μ = μm·S / (Ks + S + S²/Ki).
 *
 * @param substrate S, 0 or above
 * @source J. F. Andrews (1968), "A mathematical model for the continuous culture of microorganisms utilizing
 * inhibitory substrates", Biotechnology and Bioengineering 10:707–723; J. Monod (1949) for Ki = ∞ (from memory)
 */
export function growthRate(kinetics: Kinetics, substrate: number): number {
  const { growthMax, halfSaturation, inhibition } = kinetics;
  return (growthMax * substrate) / (halfSaturation + substrate + substrate ** 2 / inhibition);
}

/** Contents of a tank, g/L. */
export interface Culture {
  substrate: number;
  biomass: number;
}

/**
 * Change of the contents, g/L per h: S' = D·(S0 − S) − μ·X/Y, X' = D·(X0 − X) + μ·X.
 *
 * @param dilution D, flow over volume, 1/h
 */
export function cultureRates(
  kinetics: Kinetics,
  feed: Feed,
  { substrate, biomass }: Culture,
  dilution: number,
) {
  const growth = growthRate(kinetics, Math.max(substrate, 0)) * biomass;
  return {
    substrate: dilution * (feed.substrate - substrate) - growth / kinetics.yield,
    biomass: dilution * (feed.biomass - biomass) + growth,
  };
}

const scanPoints = 100;

/**
 * The steady state with the least substrate, which a culture keeps when the feed is raised slowly. With what is fed
 * turned into biomass, X = X0 + Y·(S0 − S), it is where μ(S)·X = D·(X − X0).
 *
 * @returns contents; all substrate gone at D = 0; what was fed where nothing grows
 */
export function steadyState(kinetics: Kinetics, feed: Feed, dilution: number): Culture {
  const biomassAt = (substrate: number) => feed.biomass + kinetics.yield * (feed.substrate - substrate);
  const excess = (substrate: number) =>
    growthRate(kinetics, substrate) * biomassAt(substrate) - dilution * (biomassAt(substrate) - feed.biomass);
  let low = 0;
  let high = feed.substrate;
  for (let i = 1; i <= scanPoints; i += 1) {
    const here = (feed.substrate * i) / scanPoints;
    if (excess(here) >= 0) {
      high = here;
      break;
    }
    low = here;
  }
  for (let i = 0; i < 60; i += 1) {
    const middle = (low + high) / 2;
    if (excess(middle) >= 0) high = middle;
    else low = middle;
  }
  const substrate = (low + high) / 2;
  return { substrate, biomass: biomassAt(substrate) };
}
