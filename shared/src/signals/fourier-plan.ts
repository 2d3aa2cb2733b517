/**
 * Discrete Fourier transforms X_k = Σ x_n·e^(−2πi·kn/N) of one length, any length: radix two where it is a power of
 * two, otherwise Bluestein's chirp. Everything that depends on the length alone is computed once.
 *
 * @source J. W. Cooley and J. W. Tukey (1965), Mathematics of Computation 19:297–301; L. I. Bluestein (1970),
 * IEEE Transactions on Audio and Electroacoustics 18:451–455
 */
export class FourierPlan {
  private readonly chirp: Chirp | null;
  private readonly radix: RadixTwo | null;

  /** @param length whole number, 1 or more */
  constructor(readonly length: number) {
    const isPowerOfTwo = (length & (length - 1)) === 0;
    this.radix = isPowerOfTwo ? new RadixTwo(length) : null;
    this.chirp = isPowerOfTwo ? null : new Chirp(length);
  }

  /**
   * Transforms in place.
   *
   * @param re real parts, of the length of the plan
   * @param im imaginary parts, likewise
   * @realtime safe: allocates nothing
   */
  transform(re: Float64Array, im: Float64Array): void {
    this.radix?.transform(re, im);
    this.chirp?.transform(re, im);
  }
}

class RadixTwo {
  private readonly cosines: Float64Array;
  private readonly sines: Float64Array;

  constructor(private readonly length: number) {
    const angle = (k: number) => (2 * Math.PI * k) / length;
    this.cosines = Float64Array.from({ length: length / 2 }, (_, k) => Math.cos(angle(k)));
    this.sines = Float64Array.from({ length: length / 2 }, (_, k) => -Math.sin(angle(k)));
  }

  transform(re: Float64Array, im: Float64Array): void {
    reverseBits(re, im);
    for (let size = 2; size <= this.length; size *= 2) {
      const half = size / 2;
      const stride = this.length / size;
      for (let k = 0; k < half; k += 1) {
        const cos = this.cosines[k * stride]!;
        const sin = this.sines[k * stride]!;
        for (let a = k; a < this.length; a += size) butterfly(re, im, a, a + half, cos, sin);
      }
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
    if (i < j) swap(re, im, i, j);
  }
}

function swap(re: Float64Array, im: Float64Array, i: number, j: number): void {
  const [first, second] = [re[i]!, im[i]!];
  re[i] = re[j]!;
  im[i] = im[j]!;
  re[j] = first;
  im[j] = second;
}

/** As a convolution with a chirp: kn = (k² + n² − (k − n)²)/2. */
class Chirp {
  private readonly cosines: Float64Array;
  private readonly sines: Float64Array;
  private readonly inner: RadixTwo;
  /** Transform of the chirp that is convolved with. */
  private readonly kernelRe: Float64Array;
  private readonly kernelIm: Float64Array;
  private readonly re: Float64Array;
  private readonly im: Float64Array;

  constructor(private readonly length: number) {
    const size = 2 ** Math.ceil(Math.log2(2 * length));
    const angle = Float64Array.from({ length }, (_, i) => (Math.PI * ((i * i) % (2 * length))) / length);
    this.cosines = angle.map(Math.cos);
    this.sines = angle.map(Math.sin);
    this.inner = new RadixTwo(size);
    this.re = new Float64Array(size);
    this.im = new Float64Array(size);
    this.kernelRe = this.mirrored(this.cosines);
    this.kernelIm = this.mirrored(this.sines);
    this.inner.transform(this.kernelRe, this.kernelIm);
  }

  transform(re: Float64Array, im: Float64Array): void {
    this.re.fill(0);
    this.im.fill(0);
    for (let i = 0; i < this.length; i += 1) {
      const [cos, sin] = [this.cosines[i]!, this.sines[i]!];
      this.re[i] = re[i]! * cos + im[i]! * sin;
      this.im[i] = im[i]! * cos - re[i]! * sin;
    }
    this.convolve();
    for (let i = 0; i < this.length; i += 1) {
      const [cos, sin] = [this.cosines[i]!, this.sines[i]!];
      re[i] = this.re[i]! * cos + this.im[i]! * sin;
      im[i] = this.im[i]! * cos - this.re[i]! * sin;
    }
  }

  private mirrored(values: Float64Array): Float64Array {
    const kernel = new Float64Array(this.re.length);
    kernel.set(values);
    for (let i = 1; i < values.length; i += 1) kernel[kernel.length - i] = values[i]!;
    return kernel;
  }

  /** The circular convolution with the kernel. */
  private convolve(): void {
    const { re, im, kernelRe, kernelIm } = this;
    const n = re.length;
    this.inner.transform(re, im);
    for (let i = 0; i < n; i += 1) {
      const productRe = re[i]! * kernelRe[i]! - im[i]! * kernelIm[i]!;
      // Conjugated, so that the forward transform turns it back.
      im[i] = -(re[i]! * kernelIm[i]! + im[i]! * kernelRe[i]!);
      re[i] = productRe;
    }
    this.inner.transform(re, im);
    for (let i = 0; i < n; i += 1) {
      re[i] = re[i]! / n;
      im[i] = -im[i]! / n;
    }
  }
}
