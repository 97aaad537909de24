package coilside.fit;

import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.signal.Fid;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;

/**
 * How long the coil rings after a pulse, and from when on the receiver may be trusted.
 *
 * <p>Two records with the pulse's phase turned by 180 degrees, the receiver's kept, separate what
 * follows the pulse (ring-down and signal) from what does not (DC offset, the receiver's own
 * recovery, interference). Signal and ring-down part by their decay: the signal is fitted where the
 * ringing is over, drawn back to the start and taken off; where a third record with inverted spins
 * is at hand, half its sum with the plain one is free of signal altogether.
 */
public final class RingDownFit {
  private RingDownFit() {}

  /**
   * Two records taken apart.
   *
   * @param following half the difference: what turns with the pulse's phase
   * @param staying half the sum: what does not
   */
  public record Parts(Fid following, Fid staying) {}

  /** Takes apart two records whose pulses had opposite phases. */
  public static Parts separate(Fid plus, Fid minus) {
    return new Parts(half(plus, minus, -1), half(plus, minus, 1));
  }

  /**
   * Takes apart a plain record and one with inverted spins before the pulse: the ring-down is the
   * same in both, the signal changes sign ({@code following} holds the signal, {@code staying} the
   * ring-down and whatever an imperfect inversion left of the signal).
   */
  public static Parts separateByInversion(Fid plain, Fid inverted) {
    return new Parts(half(plain, inverted, -1), half(plain, inverted, 1));
  }

  private static Fid half(Fid a, Fid b, double sign) {
    if (a.points() != b.points() || a.dwellSeconds() != b.dwellSeconds()) {
      throw new IllegalArgumentException(
          "records of " + a.points() + " and " + b.points() + " points cannot be taken apart");
    }
    double[] re = new double[a.points()];
    double[] im = new double[a.points()];
    for (int k = 0; k < re.length; k++) {
      re[k] = (a.re(k) + sign * b.re(k)) / 2;
      im[k] = (a.im(k) + sign * b.im(k)) / 2;
    }
    return new Fid(re, im, a.dwellSeconds(), a.startSeconds(), a.carrierHertz());
  }

  /**
   * What was found.
   *
   * @param visible whether a ring-down stands out of the noise
   * @param timeConstant of its amplitude, s; without uncertainty where it is not resolved
   * @param initial its size at the first sample used, V
   * @param clearSeconds time after the pulse's centre at which it has fallen below {@code fraction}
   *     of the noise, s
   * @param receiveDelaySeconds the delay that follows from it, s: {@code clearSeconds} and one
   *     dwell
   * @param signal what the spins' signal was taken to be; null when none was seen
   * @param warnings one sentence each
   */
  public record Result(
      boolean visible,
      Measured timeConstant,
      Measured initial,
      Measured clearSeconds,
      double receiveDelaySeconds,
      DecayResult signal,
      List<String> warnings) {
    public Result {
      warnings = List.copyOf(warnings);
    }
  }

  /**
   * Measures the ring-down in a record that follows the pulse.
   *
   * @param following the record, the first sample as early as the receiver allows
   * @param sigma its noise of one real channel, one sample, V
   * @param firstUsable first sample that is not clipped or blanked
   * @param fraction of the noise below which the ring-down counts as gone, e.g. 0.5
   */
  public static Result fit(Fid following, double sigma, int firstUsable, double fraction)
      throws NotDetermined {
    int n = following.points();
    if (!(sigma > 0) || !(fraction > 0) || firstUsable < 0 || firstUsable > n - 32) {
      throw NotDetermined.of(
          NotDetermined.Reason.BAD_INPUT,
          "a ring-down record of "
              + n
              + " points from sample "
              + firstUsable
              + " with noise "
              + sigma
              + " V cannot be used",
          "record at least 32 samples after the receiver opens");
    }
    List<String> warnings = new ArrayList<>();
    Fid record = following.slice(firstUsable, n);
    DecayResult signal = null;
    Fid ring = record;
    // Where the ringing ends is not known yet: begin late, come nearer as long as the fit is clean.
    int split = record.points() / 2;
    for (int pass = 0; pass < 4; pass++) {
      try {
        signal =
            DecayFit.fit(
                record.slice(split, record.points()),
                DecayFit.Options.usual()
                    .withForm(DecayFit.Form.ONE_EXPONENTIAL)
                    .withLargestRelative(0.5));
        ring = signal.residuals(record);
      } catch (NotDetermined none) {
        if (signal == null) {
          ring = record;
        }
      }
      int end = lastAbove(ring, 3 * sigma);
      int next = Math.min(record.points() / 2, Math.max(8, 2 * end));
      if (next >= split) {
        break;
      }
      split = next;
    }
    int end = lastAbove(ring, 3 * sigma);
    double dt = record.dwellSeconds();
    double first = record.time(0);
    double at0 = ring.magnitude(0);
    if (end < 0) {
      return new Result(
          false,
          Measured.withoutUncertainty(
              dt, Unit.SECOND, "the ring-down is over before the first sample"),
          Measured.of(0, sigma, Unit.VOLT),
          Measured.of(first, dt / Math.sqrt(12), Unit.SECOND),
          Math.max(first, 0),
          signal,
          warnings);
    }
    if (end < 3) {
      warnings.add("the ring-down is not resolved at this dwell time: an upper limit is given");
      double clear = record.time(end + 2);
      return new Result(
          true,
          Measured.withoutUncertainty(
              (end + 1) * dt, Unit.SECOND, "shorter than the dwell time resolves: an upper limit"),
          Measured.of(at0, sigma, Unit.VOLT),
          Measured.of(clear, dt, Unit.SECOND),
          clear + dt,
          signal,
          warnings);
    }
    int length = Math.min(ring.points(), Math.max(16, 3 * (end + 1)));
    Fid early = ring.slice(0, length);
    DecayResult fit =
        DecayFit.fit(
            new Fid(early.re(), early.im(), dt, 0, early.carrierHertz()),
            DecayFit.Options.usual()
                .withForm(DecayFit.Form.ONE_EXPONENTIAL)
                .withLargestRelative(1));
    warnings.addAll(
        fit.warnings().isEmpty()
            ? List.of()
            : List.of(
                String.format(
                    Locale.ROOT,
                    "the ring-down is not one exponential (residuals up to %.0f sigma)",
                    fit.misfitSigma())));
    double tau = fit.t2Star().value();
    double a = fit.amplitude().value();
    double after = Math.max(0, tau * Math.log(a / (fraction * sigma)));
    double measured = (end + 1) * dt;
    double clear = first + Math.max(after, measured);
    double u =
        Math.hypot(
            Math.log(Math.max(Math.E, a / (fraction * sigma))) * fit.t2Star().u(),
            tau * fit.amplitude().relative());
    return new Result(
        true,
        fit.t2Star(),
        fit.amplitude(),
        Measured.of(clear, u, Unit.SECOND),
        clear + dt,
        signal,
        warnings);
  }

  /**
   * The last sample of the leading stretch that stands above the limit: the stretch ends with eight
   * samples in a row below it. -1 when there is none.
   */
  private static int lastAbove(Fid fid, double limit) {
    int last = -1;
    for (int k = 0; k < fid.points() && k - last <= 8; k++) {
      if (fid.magnitude(k) > limit * 1.25) {
        last = k;
      }
    }
    return last;
  }
}
