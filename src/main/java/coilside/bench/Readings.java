package coilside.bench;

import coilside.fit.DecayFit;
import coilside.fit.DecayResult;
import coilside.fit.NotDetermined;
import coilside.quantity.Measured;
import coilside.quantity.Nucleus;
import coilside.quantity.Unit;
import coilside.shot.Shot;
import coilside.signal.Fid;
import coilside.signal.Fourier;
import coilside.signal.Scan;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Optional;

/** What a fitted decay says, under the value names of the ladder. */
final class Readings {
  /** Part of its width by which a line without a simple form has no definite middle. */
  private static final double FORM = 0.01;

  /** Longest T1 over the 1/e time of the recovery from which on there are two components. */
  private static final double APART = 1.02;

  private Readings() {}

  /** The values of the resonance rung. */
  static Reading resonance(Fid fid, Capture capture) throws NotMeasurable {
    List<Scan> scans = capture.scans();
    DecayResult fit = fit(fid, scans.size());
    Wander wander = Wander.of(capture.shots(), scans);
    boolean formOpen = twoComponents(capture) || fit.envelope() != DecayResult.Envelope.EXPONENTIAL;
    Measured larmor = wander.widen(middle(larmor(fid, fit), fit, formOpen));
    Map<String, Measured> values = new LinkedHashMap<>();
    values.put("larmor_frequency", larmor);
    values.put("field", field(larmor));
    values.put("snr", fit.snr());
    String caption =
        String.format(
            Locale.ROOT,
            "resonance at %.6f MHz, offset %+.1f Hz",
            larmor.value() * 1e-6,
            fit.offsetHertz().value());
    List<String> warnings = warnings(fit, scans);
    hidden(fit, formOpen).ifPresent(warnings::add);
    wander.warning().ifPresent(w -> warnings.add(0, w));
    return new Reading(values, warnings, trace(Rung.RESONANCE, fid, fit, caption));
  }

  /** The values of the T2* rung from one scan, as it came. */
  static Reading decay(Fid fid, List<Scan> scans, double target) throws NotMeasurable {
    return decay(fid, List.of(), List.of(), scans, target, false);
  }

  /**
   * The values of the T2* rung.
   *
   * @param target wanted relative uncertainty of T2*; NaN where none is
   * @param two whether the sample is known to hold two components
   */
  static Reading decay(Fid fid, List<Shot> shots, List<Scan> scans, double target, boolean two)
      throws NotMeasurable {
    return decay(fid, shots, scans, scans, target, two);
  }

  private static Reading decay(
      Fid fid, List<Shot> shots, List<Scan> single, List<Scan> scans, double target, boolean two)
      throws NotMeasurable {
    DecayResult fit = fit(fid, scans.size());
    Wander wander = Wander.of(shots, single);
    boolean formOpen = two || fit.envelope() != DecayResult.Envelope.EXPONENTIAL;
    Measured larmor = wander.widen(middle(larmor(fid, fit), fit, formOpen));
    Map<String, Measured> values = new LinkedHashMap<>();
    values.put("t2_star", effective(fit, formOpen));
    values.put("linewidth", fit.linewidthHertz());
    values.put("amplitude", fit.amplitude());
    values.put("snr", fit.snr());
    values.put("larmor_frequency", larmor);
    values.put("field_spread", fit.fieldSpread(larmor.value()));
    values.put("field", field(larmor));
    List<String> warnings = warnings(fit, scans);
    hidden(fit, formOpen).ifPresent(warnings::add);
    wander.warning().ifPresent(w -> warnings.add(0, w));
    double reached = fit.t2Star().relative();
    if (reached > target) {
      warnings.add(
          String.format(
              Locale.ROOT,
              "T2* is known to %.1f %%, not to the wanted %.1f %%: about %.0f scans would do",
              100 * reached,
              100 * target,
              scans.size() * Math.pow(reached / target, 2)));
    }
    String caption =
        String.format(
            Locale.ROOT,
            "T2* %.4g ms, linewidth %.4g Hz, SNR %.3g (%s)",
            fit.t2Star().value() * 1e3,
            fit.linewidthHertz().value(),
            fit.snr().value(),
            fit.envelope().name().toLowerCase(Locale.ROOT).replace('_', ' '));
    return new Reading(values, warnings, trace(Rung.T2STAR, fid, fit, caption));
  }

  private static DecayResult fit(Fid fid, int scans) throws NotMeasurable {
    try {
      return DecayFit.fit(fid, DecayFit.Options.usual().withScans(scans));
    } catch (NotDetermined e) {
      throw refused("the decay is not determined", e);
    }
  }

  /** A refusal that passes on why an estimate is not determined and what it would take. */
  static NotMeasurable refused(String what, NotDetermined e) {
    String scans =
        e.scansNeeded().isPresent()
            ? "; about " + e.scansNeeded().getAsLong() + " scans would do"
            : "";
    return new NotMeasurable(what + ": " + e.getMessage() + scans, List.of(e.remedy()));
  }

  /**
   * The middle of a line that is not one exponential's, or that holds two components which one
   * exponential happens to fit, is uncertain by a part of its width, whichever form is fitted.
   */
  private static Measured middle(Measured larmor, DecayResult fit, boolean formOpen) {
    return formOpen
        ? Measured.of(
            larmor.value(),
            Math.hypot(larmor.u(), FORM * fit.linewidthHertz().value()),
            larmor.unit())
        : larmor;
  }

  /** T2*; the 1/e time of a decay of which the form is open depends on the form fitted to it. */
  private static Measured effective(DecayResult fit, boolean formOpen) {
    Measured t = fit.t2Star();
    return formOpen ? Measured.of(t.value(), Math.hypot(t.u(), FORM / 2 * t.value()), t.unit()) : t;
  }

  private static Optional<String> hidden(DecayResult fit, boolean formOpen) {
    return formOpen && fit.envelope() == DecayResult.Envelope.EXPONENTIAL
        ? Optional.of(
            "the sample recovers with two T1, so the line may hold two that these scans do not tell"
                + " apart: T2* and frequency are widened by what that may hide")
        : Optional.empty();
  }

  /** Notes whether T1 showed two components in this sample: its longest T1 is not its 1/e time. */
  static void noteComponents(Acquisition a) {
    a.known()
        .finding(Rung.T1)
        .filter(f -> f.conditions().sample().equals(a.settings().sample()))
        .map(Finding::values)
        .filter(v -> v.containsKey("repetition_time") && v.containsKey("t1"))
        .ifPresent(
            v -> {
              double longest = v.get("repetition_time").value() / GainMethod.RECOVERED;
              a.note("components", longest > APART * v.get("t1").value() ? 2 : 1);
            });
  }

  static boolean twoComponents(Capture capture) {
    return Notes.number(capture, "components", 1) > 1;
  }

  /** Says so when a value is not known as well as wanted; a target of NaN is always met. */
  static Optional<String> missedTarget(String name, Measured value, double target) {
    return value.relative() > target
        ? Optional.of(
            String.format(
                Locale.ROOT,
                "%s is known to %.1f %%, not to the wanted %.1f %%",
                name,
                100 * value.relative(),
                100 * target))
        : Optional.empty();
  }

  static Measured larmor(Fid fid, DecayResult fit) {
    return Measured.of(
        fid.carrierHertz() + fit.offsetHertz().value(), fit.offsetHertz().u(), Unit.HERTZ);
  }

  /** The field that the Larmor frequency of the proton in water stands for, T. */
  static Measured field(Measured larmor) {
    Nucleus nucleus = Nucleus.HYDROGEN_1;
    double field = larmor.value() / nucleus.larmorHertzPerTesla();
    double relative =
        Math.hypot(
            larmor.relative(), nucleus.standardUncertainty() / nucleus.larmorHertzPerTesla());
    return Measured.of(field, field * relative, Unit.TESLA);
  }

  private static List<String> warnings(DecayResult fit, List<Scan> scans) {
    List<String> out = new ArrayList<>(fit.warnings());
    int clipped = scans.stream().mapToInt(Scan::clippedSamples).sum();
    if (clipped > 0) {
      out.add(
          clipped
              + " samples clip at the digitiser, which bends amplitude and decay: measure the gain"
              + " again");
    }
    int retries = scans.stream().mapToInt(Scan::retries).sum();
    if (retries > 0) {
      out.add(retries + " damaged answers were asked for again; none was averaged in");
    }
    return out;
  }

  private static Picture trace(Rung rung, Fid fid, DecayResult fit, String caption) {
    return new Picture.Trace(
        rung,
        fid,
        Optional.of(fit.model(fid)),
        0,
        Optional.of(Fourier.spectrum(fid)),
        List.of(),
        caption);
  }
}
