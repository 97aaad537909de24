/**
 * Estimates with covariance, the bounds they are held against, and where to measure next. Start at
 * {@link coilside.fit.DecayFit} for an FID, {@link coilside.fit.NutationFit} for a curve.
 *
 * <p>Every result carries standard uncertainties; what the samples do not determine is refused with
 * {@link coilside.fit.NotDetermined}, never invented.
 *
 * <p>Threads: fits are static and keep no state; plans belong to one thread at a time.
 *
 * <p>May import: quantity, spin, signal; Commons Math.
 */
package coilside.fit;
