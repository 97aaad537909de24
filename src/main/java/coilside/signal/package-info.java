/**
 * Samples and what is done with them: FIDs, spectra, averaging, windows, phasing, noise, peaks.
 *
 * <p>May import: quantity; JTransforms.
 */
package coilside.signal;
