package coilside.fit;

import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.signal.Fid;
import java.util.List;

/**
 * What {@link DecayFit} found in an FID. Amplitude and phase hold at time zero, the centre of the
 * pulse.
 *
 * @param envelope the form of decay that the samples demanded
 * @param t2Star for an exponential its time constant; for any other envelope the time after which
 *     it has fallen to 1/e, s
 * @param offsetHertz frequency above the carrier, Hz (of the largest component)
 * @param phaseRadians phase at time zero, rad
 * @param amplitude of the whole signal at time zero, V
 * @param linewidthHertz full width at half height of the absorption line, Hz
 * @param snr amplitude over the noise of one real channel, one sample
 * @param noiseSigma that noise, from the residuals, V
 * @param components each exponential of the model, largest first; one for a Gaussian envelope
 * @param dcRe DC offset fitted with it, V; 0 when none was
 * @param dcIm DC offset fitted with it, V
 * @param covariance of (amplitude V, phase rad, offset Hz, T2* s), in that order
 * @param misfitSigma largest departure of the residuals from noise near the line, in sigma
 * @param misfitThresholdSigma what noise exceeds once in a thousand fits
 * @param criterion by which this envelope was chosen, one sentence
 * @param warnings what the reader should know, one sentence each
 */
public record DecayResult(
    Envelope envelope,
    Measured t2Star,
    Measured offsetHertz,
    Measured phaseRadians,
    Measured amplitude,
    Measured linewidthHertz,
    Measured snr,
    Measured noiseSigma,
    List<Component> components,
    double dcRe,
    double dcIm,
    double[][] covariance,
    double misfitSigma,
    double misfitThresholdSigma,
    String criterion,
    List<String> warnings) {

  /** The form of a decay. */
  public enum Envelope {
    /** One exponential. */
    EXPONENTIAL,
    /** Two exponentials, each with its own frequency. */
    TWO_EXPONENTIALS,
    /** exp(-t/T - (t/G)^2): a Gaussian spread of fields on top of an exponential. */
    GAUSSIAN,
    /** Neither: T2* is read off the averaged envelope without a model. */
    FREE
  }

  /**
   * One term of the model: c exp(i(phase + 2 pi f t)) exp(-t rate - t^2 gauss).
   *
   * @param amplitude at time zero, V
   * @param phaseRadians at time zero, rad
   * @param offsetHertz above the carrier, Hz
   * @param t2Star 1/rate, s; infinite where the decay is wholly Gaussian
   * @param gaussPerSecondSquared the Gaussian part, 1/s^2; 0 for an exponential
   */
  public record Component(
      Measured amplitude,
      Measured phaseRadians,
      Measured offsetHertz,
      Measured t2Star,
      double gaussPerSecondSquared) {}

  public DecayResult {
    components = List.copyOf(components);
    warnings = List.copyOf(warnings);
  }

  /** T2* as a rate: field spread over the carrier, linewidth/carrier, a pure number. */
  public Measured fieldSpread(double larmorHertz) {
    return Measured.of(
        linewidthHertz.value() / larmorHertz, linewidthHertz.u() / larmorHertz, Unit.ONE);
  }

  /** The fitted model at the instants of an FID. */
  public Fid model(Fid like) {
    int n = like.points();
    double[] re = new double[n];
    double[] im = new double[n];
    for (int k = 0; k < n; k++) {
      re[k] = dcRe;
      im[k] = dcIm;
      double t = like.time(k);
      for (Component c : components) {
        double size =
            c.amplitude().value()
                * Math.exp(-t / c.t2Star().value() - t * t * c.gaussPerSecondSquared());
        double angle = c.phaseRadians().value() + 2 * Math.PI * c.offsetHertz().value() * t;
        re[k] += size * Math.cos(angle);
        im[k] += size * Math.sin(angle);
      }
    }
    return new Fid(re, im, like.dwellSeconds(), like.startSeconds(), like.carrierHertz());
  }

  /** The FID less the model. */
  public Fid residuals(Fid fid) {
    Fid model = model(fid);
    double[] re = new double[fid.points()];
    double[] im = new double[fid.points()];
    for (int k = 0; k < re.length; k++) {
      re[k] = fid.re(k) - model.re(k);
      im[k] = fid.im(k) - model.im(k);
    }
    return new Fid(re, im, fid.dwellSeconds(), fid.startSeconds(), fid.carrierHertz());
  }

  /**
   * The decay's shape without amplitude and phase: 1 at time zero. What a scan's amplitude is
   * projected on.
   */
  public Fid shape(Fid like) {
    Fid whole = model(like);
    double re0 = 0;
    double im0 = 0;
    for (Component c : components) {
      re0 += c.amplitude().value() * Math.cos(c.phaseRadians().value());
      im0 += c.amplitude().value() * Math.sin(c.phaseRadians().value());
    }
    double size = re0 * re0 + im0 * im0;
    double[] re = new double[whole.points()];
    double[] im = new double[whole.points()];
    for (int k = 0; k < re.length; k++) {
      double r = whole.re(k) - dcRe;
      double i = whole.im(k) - dcIm;
      re[k] = (r * re0 + i * im0) / size;
      im[k] = (i * re0 - r * im0) / size;
    }
    return new Fid(re, im, like.dwellSeconds(), like.startSeconds(), like.carrierHertz());
  }
}
