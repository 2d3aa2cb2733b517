/**
 * Direction nearest to the wanted one that lets the margin h of a constraint (h ≥ 0 is allowed) shrink no faster
 * than c·h: u − ∇h·min(0, ∇h·u + c·h)/‖∇h‖², the closed form of the quadratic programme with one constraint. In
 * the interior it changes nothing; on the bound it takes away what leads out; beyond it it leads back at c·|h|.
 *
 * @param wanted direction, changed in place; all three in scaled actuator units, so that axes compare
 * @param slope ∇h
 * @param margin h, one number (in an array, so that it is not put on the heap on its way)
 * @param limits c, 1/s
 * @returns true where the direction was changed
 * @source A. D. Ames, X. Xu, J. W. Grizzle and P. Tabuada (2017), "Control barrier function based quadratic
 * programs for safety critical systems", IEEE Transactions on Automatic Control 62:3861–3876 (from memory); with
 * seeking: A. Williams, M. Krstić and A. Scheinker (2023), "Semi-global practical extremum seeking with practical
 * safety", arXiv:2309.15401
 */
export function filterDirection(
  wanted: Float64Array,
  slope: Float64Array,
  margin: Float64Array,
  limits: { readonly approachRate: number },
): boolean {
  let along = 0;
  let square = 0;
  for (let i = 0; i < wanted.length; i += 1) {
    const s = slope[i] as number;
    along += s * (wanted[i] as number);
    square += s * s;
  }
  const excess = along + limits.approachRate * (margin[0] as number);
  if (!(excess < 0) || square === 0) return false;
  for (let i = 0; i < wanted.length; i += 1) {
    wanted[i] = (wanted[i] as number) - ((slope[i] as number) * excess) / square;
  }
  return true;
}

/**
 * Logarithmic barrier of a margin, ln(h/knee), continued below the knee by the parabola that meets it with the
 * same value, slope and curvature, so that it stays finite on the forbidden side and leads back from there.
 *
 * @param margin h, any finite number
 * @param knee above zero
 * @returns 0 at the knee, falling to minus infinity with h
 * @source A. V. Fiacco and G. P. McCormick (1968), "Nonlinear Programming: Sequential Unconstrained Minimization
 * Techniques"; with seeking: D. DeHaan and M. Guay (2005), "Extremum-seeking control of state-constrained nonlinear
 * systems", Automatica 41:1567–1574; the continuation: C. Feller and C. Ebenbauer (2017), "Relaxed logarithmic
 * barrier function based model predictive control of linear systems", IEEE Transactions on Automatic Control
 * 62:1223–1238 (all from memory)
 */
export function relaxedBarrier(margin: number, knee: number): number {
  if (margin > knee) return Math.log(margin / knee);
  const below = (margin - 2 * knee) / knee;
  return (1 - below * below) / 2;
}
