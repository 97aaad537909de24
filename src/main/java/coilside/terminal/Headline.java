package coilside.terminal;

import coilside.bench.Picture;
import coilside.bench.Rung;
import coilside.fit.DecayFit;
import coilside.fit.DecayResult;
import coilside.fit.NotDetermined;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import coilside.signal.Fid;
import java.util.EnumMap;
import java.util.Map;

/** One of the numbers that are watched while tuning and shimming. */
enum Headline {
  LINEWIDTH("linewidth", -1),
  T2STAR("T2*", 1),
  AMPLITUDE("amplitude", 1),
  SNR("SNR", 1),
  FREQUENCY("frequency", 0);

  final String words;

  /** +1 where larger is better, -1 where smaller is, 0 where neither. */
  final int better;

  Headline(String words, int better) {
    this.words = words;
    this.better = better;
  }

  Headline next(int by) {
    return values()[Math.floorMod(ordinal() + by, values().length)];
  }

  /**
   * The numbers of a decay, by the same estimator as the ladder's T2* rung; empty where it is not
   * determined or the picture is of something else.
   */
  static Map<Headline, Measured> of(Picture picture) {
    Map<Headline, Measured> out = new EnumMap<>(Headline.class);
    if (!(picture instanceof Picture.Trace trace)
        || trace.rung() != Rung.T2STAR
        || trace.fit().isEmpty()) {
      return out;
    }
    Fid fid = trace.fid();
    try {
      DecayResult fit = DecayFit.fit(fid);
      out.put(LINEWIDTH, fit.linewidthHertz());
      out.put(T2STAR, fit.t2Star());
      out.put(AMPLITUDE, fit.amplitude());
      out.put(SNR, fit.snr());
      Measured offset = fit.offsetHertz();
      double larmor = fid.carrierHertz() + offset.value();
      out.put(
          FREQUENCY,
          offset.hasUncertainty()
              ? Measured.of(larmor, offset.u(), Unit.HERTZ)
              : Measured.withoutUncertainty(larmor, Unit.HERTZ, offset.whyNoUncertainty()));
    } catch (NotDetermined e) {
      // The picture's own caption tells why there are no numbers.
      out.clear();
    }
    return out;
  }
}
