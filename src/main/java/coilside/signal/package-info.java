/**
 * Samples and what is done with them: FIDs, spectra, averaging, windows, phasing, noise, peaks,
 * down-conversion. Start at {@link coilside.signal.Fid}, then {@link coilside.signal.Fourier}.
 *
 * <p>Conventions, here once for the whole program: s(t) = A exp(i(phi + 2 pi f t)) exp(-t/T2*), f
 * &gt; 0 when the Larmor frequency lies above the carrier; time zero at the pulse's centre; forward
 * transform exp(-2 pi i k n/N), zero frequency in the middle, first point halved; sigma is the
 * noise of one real channel, one sample.
 *
 * <p>Threads: values are immutable and static methods keep no state, so both may be used from any
 * thread; {@link coilside.signal.Averager} belongs to one thread at a time.
 *
 * <p>May import: quantity; JTransforms.
 */
package coilside.signal;
