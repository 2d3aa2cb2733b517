/**
 * Discrete Fourier transform X_k = Σ x_n·e^(−2πi·kn/N), in place, of any length: radix two where the length is a
 * power of two, otherwise Bluestein's chirp.
 *
 * @param re real parts, replaced by those of the transform
 * @param im imaginary parts, of the same length
 * @source J. W. Cooley and J. W. Tukey (1965), Mathematics of Computation 19:297–301; L. I. Bluestein (1970),
 * IEEE Transactions on Audio and Electroacoustics 18:451–455
 */
export function fourierTransform(re: Float64Array, im: Float64Array): void {
  if ((re.length & (re.length - 1)) === 0) radixTwo(re, im);
  else chirp(re, im);
}

function radixTwo(re: Float64Array, im: Float64Array): void {
  const n = re.length;
  reverseBits(re, im);
  for (let size = 2; size <= n; size *= 2) {
    const half = size / 2;
    for (let k = 0; k < half; k += 1) {
      const cos = Math.cos((2 * Math.PI * k) / size);
      const sin = -Math.sin((2 * Math.PI * k) / size);
      for (let a = k; a < n; a += size) butterfly(re, im, a, a + half, cos, sin);
    }
  }
}

function butterfly(re: Float64Array, im: Float64Array, a: number, b: number, cos: number, sin: number): void {
  const turnedRe = re[b]! * cos - im[b]! * sin;
  const turnedIm = re[b]! * sin + im[b]! * cos;
  re[b] = re[a]! - turnedRe;
  im[b] = im[a]! - turnedIm;
  re[a] = re[a]! + turnedRe;
  im[a] = im[a]! + turnedIm;
}

function reverseBits(re: Float64Array, im: Float64Array): void {
  const n = re.length;
  for (let i = 1, j = 0; i < n; i += 1) {
    let bit = n >> 1;
    for (; j & bit; bit >>= 1) j ^= bit;
    j ^= bit;
    if (i >= j) continue;
    [re[i], re[j]] = [re[j]!, re[i]!];
    [im[i], im[j]] = [im[j]!, im[i]!];
  }
}

/** As a convolution with a chirp: kn = (k² + n² − (k − n)²)/2. */
function chirp(re: Float64Array, im: Float64Array): void {
  const n = re.length;
  const size = 2 ** Math.ceil(Math.log2(2 * n));
  const angle = Float64Array.from({ length: n }, (_, i) => (Math.PI * ((i * i) % (2 * n))) / n);
  const [aRe, aIm, bRe, bIm] = Array.from({ length: 4 }, () => new Float64Array(size)) as Four;
  for (let i = 0; i < n; i += 1) {
    const [cos, sin] = [Math.cos(angle[i]!), Math.sin(angle[i]!)];
    aRe[i] = re[i]! * cos + im[i]! * sin;
    aIm[i] = im[i]! * cos - re[i]! * sin;
    bRe[i] = cos;
    bIm[i] = sin;
    if (i > 0) [bRe[size - i], bIm[size - i]] = [cos, sin];
  }
  convolve(aRe, aIm, bRe, bIm);
  for (let i = 0; i < n; i += 1) {
    const [cos, sin] = [Math.cos(angle[i]!), Math.sin(angle[i]!)];
    re[i] = aRe[i]! * cos + aIm[i]! * sin;
    im[i] = aIm[i]! * cos - aRe[i]! * sin;
  }
}

type Four = [Float64Array, Float64Array, Float64Array, Float64Array];

/** Puts the circular convolution of a and b into a. */
function convolve(aRe: Float64Array, aIm: Float64Array, bRe: Float64Array, bIm: Float64Array): void {
  const n = aRe.length;
  radixTwo(aRe, aIm);
  radixTwo(bRe, bIm);
  for (let i = 0; i < n; i += 1) {
    const productRe = aRe[i]! * bRe[i]! - aIm[i]! * bIm[i]!;
    // Conjugated, so that the forward transform turns it back.
    aIm[i] = -(aRe[i]! * bIm[i]! + aIm[i]! * bRe[i]!);
    aRe[i] = productRe;
  }
  radixTwo(aRe, aIm);
  for (let i = 0; i < n; i += 1) {
    aRe[i] = aRe[i]! / n;
    aIm[i] = -aIm[i]! / n;
  }
}
