package coilside.board.simulated;

import coilside.board.profile.SampleFormat.RealSampling;
import coilside.board.simulated.FirmwareReceiver.Counts;
import coilside.board.simulated.Scenario.Interference;
import coilside.board.simulated.SimulatedLineSum.Plan;
import coilside.shot.Receive;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.SplittableRandom;

/**
 * From the coil's terminals to the ADC: filter, noise, lines, ringing, gain and imperfections.
 *
 * <p>The receive filter is flat to 0.4 of the sampling rate each side of the carrier (0.2 for real
 * samples) and closed from 0.5 (0.25): what lies beyond is not folded back.
 */
final class SimulatedReceiver {
  private static final int CHUNK = 16384;
  private static final int KEPT = 8;
  private static final double BLOCK_SECONDS = 100e-6;
  private static final double FLAT = 0.4;
  private static final double CLOSED = 0.5;

  private record WindowKind(double dwellSeconds, int samples) {}

  private final Scenario scenario;
  private final SimulatedDigitiser digitiser;
  private final SimulatedMagnet magnet;
  private final SimulatedSpins spins;
  private final SplittableRandom random;
  private final double[] linePhase;
  private final SimulatedLineSum sum = new SimulatedLineSum();
  private final double[] cRe;
  private final double[] cIm;
  private final Map<WindowKind, Plan> plans =
      new LinkedHashMap<>(16, 0.75f, true) {
        private static final long serialVersionUID = 1L;

        @Override
        protected boolean removeEldestEntry(Map.Entry<WindowKind, Plan> eldest) {
          return size() > KEPT;
        }
      };

  SimulatedReceiver(
      Scenario scenario,
      SimulatedDigitiser digitiser,
      SimulatedMagnet magnet,
      SimulatedSpins spins,
      SplittableRandom random) {
    this.scenario = scenario;
    this.digitiser = digitiser;
    this.magnet = magnet;
    this.spins = spins;
    this.random = random;
    this.linePhase = new double[scenario.interference().size()];
    for (int i = 0; i < linePhase.length; i++) {
      linePhase[i] = 2 * Math.PI * random.nextDouble();
    }
    cRe = new double[spins.size()];
    cIm = new double[spins.size()];
  }

  /** What the filter lets through of a frequency, for complex samples at this dwell time. */
  static double filter(double offsetHertz, double dwellSeconds) {
    double x = Math.abs(offsetHertz) * dwellSeconds;
    if (x <= FLAT) {
      return 1;
    }
    if (x >= CLOSED) {
      return 0;
    }
    double c = Math.cos(Math.PI / 2 * (x - FLAT) / (CLOSED - FLAT));
    return c * c;
  }

  Counts window(
      Receive receive, double carrierHertz, double gainDecibels, double ringRe, double ringIm) {
    int n = receive.points();
    double dwell = receive.dwellSeconds();
    double width = digitiser.real().isPresent() ? 2 * dwell : dwell;
    double start = -digitiser.filterDelaySamples() * dwell;
    double[] re = new double[n];
    double[] im = new double[n];
    addSpins(re, im, carrierHertz, dwell, width, start);
    addLines(re, im, carrierHertz, dwell, width, start);
    addRinging(re, im, carrierHertz, dwell, width, start, ringRe, ringIm);
    turn(re, im, -receive.phaseRadians());
    spoil(re, im);
    double gain = Math.pow(10, gainDecibels / 20);
    return digitiser.real().isPresent()
        ? real(re, im, digitiser.real().get(), carrierHertz, gain)
        : complex(re, im, dwell, gain);
  }

  private void addSpins(
      double[] re, double[] im, double carrierHertz, double dwell, double width, double start) {
    int n = re.length;
    double offset = magnet.offsetHertz(carrierHertz, n * dwell);
    double volts = scenario.sample().signalVolts();
    for (int j = 0; j < cRe.length; j++) {
      double f = offset + spins.offsetHertz(j);
      double pass = volts * filter(f, width);
      if (pass == 0) {
        cRe[j] = 0;
        cIm[j] = 0;
        continue;
      }
      SimulatedCoilResponse coil = SimulatedCoilResponse.at(scenario.coil(), carrierHertz + f);
      double x = pass * spins.transverseX(j);
      double y = pass * spins.transverseY(j);
      cRe[j] = x * coil.re() - y * coil.im();
      cIm[j] = x * coil.im() + y * coil.re();
    }
    if (start != 0) {
      shift(start);
    }
    Plan plan = plans.computeIfAbsent(new WindowKind(dwell, Math.min(n, CHUNK)), this::plan);
    double[] a = new double[Math.min(n, CHUNK)];
    double[] b = new double[a.length];
    for (int at = 0; at < n; at += CHUNK) {
      int count = Math.min(CHUNK, n - at);
      for (int c = 0; c < spins.components(); c++) {
        Arrays.fill(a, 0);
        Arrays.fill(b, 0);
        sum.add(plan, cRe, cIm, spins.first(c), spins.first(c + 1), a, b, count);
        double decay = Math.exp(-dwell / spins.t2Seconds(c));
        double left = Math.exp(-(start + at * dwell) / spins.t2Seconds(c));
        for (int k = 0; k < count; k++) {
          re[at + k] += left * a[k];
          im[at + k] += left * b[k];
          left *= decay;
        }
      }
      if (at + CHUNK < n) {
        shift(CHUNK * dwell);
      }
    }
    carry(re, im, offset, dwell, start);
  }

  private Plan plan(WindowKind kind) {
    double[] step = new double[spins.size()];
    for (int j = 0; j < step.length; j++) {
      double turns = spins.offsetHertz(j) * kind.dwellSeconds();
      step[j] = 2 * Math.PI * (turns - Math.rint(turns));
    }
    return new Plan(step, kind.samples());
  }

  private void shift(double seconds) {
    for (int j = 0; j < cRe.length; j++) {
      double turns = spins.offsetHertz(j) * seconds;
      double angle = 2 * Math.PI * (turns - Math.rint(turns));
      double c = Math.cos(angle);
      double s = Math.sin(angle);
      double x = cRe[j] * c - cIm[j] * s;
      cIm[j] = cRe[j] * s + cIm[j] * c;
      cRe[j] = x;
    }
  }

  /**
   * From the magnet's frame to the carrier's, mains modulation and cable phase included. The phase
   * is exact at the ends of blocks and linear within them: for 10 Hz of swing at 50 Hz that is
   * within 1e-5 rad.
   */
  private void carry(double[] re, double[] im, double offset, double dwell, double start) {
    double cable = scenario.sample().phaseRadians() / (2 * Math.PI);
    int block = 64;
    if (magnet.modulated()) {
      block = (int) Math.max(1, Math.min(block, BLOCK_SECONDS / dwell));
    }
    double from = magnet.turns() + cable + offset * start + magnet.mainsTurns(start);
    for (int at = 0; at < re.length; at += block) {
      double later = start + (at + block) * dwell;
      double to = magnet.turns() + cable + offset * later + magnet.mainsTurns(later);
      double each = 2 * Math.PI * (to - from) / block;
      double stepRe = Math.cos(each);
      double stepIm = Math.sin(each);
      double angle = 2 * Math.PI * (from - Math.rint(from));
      double c = Math.cos(angle);
      double s = Math.sin(angle);
      int end = Math.min(re.length, at + block);
      for (int k = at; k < end; k++) {
        double x = re[k] * c - im[k] * s;
        im[k] = re[k] * s + im[k] * c;
        re[k] = x;
        double t = c * stepRe - s * stepIm;
        s = c * stepIm + s * stepRe;
        c = t;
      }
      from = to;
    }
  }

  private void addLines(
      double[] re, double[] im, double carrierHertz, double dwell, double width, double start) {
    for (int i = 0; i < linePhase.length; i++) {
      Interference line = scenario.interference().get(i);
      double f = line.hertz() - carrierHertz;
      double amplitude = line.volts() * filter(f, width);
      if (amplitude == 0) {
        continue;
      }
      double turns = f * (magnet.seconds() + start);
      double angle = linePhase[i] + 2 * Math.PI * (turns - Math.rint(turns));
      addTone(re, im, amplitude * Math.cos(angle), amplitude * Math.sin(angle), f * dwell, 1);
    }
  }

  private void addRinging(
      double[] re,
      double[] im,
      double carrierHertz,
      double dwell,
      double width,
      double start,
      double ringRe,
      double ringIm) {
    double f = scenario.coil().tunedHertz() - carrierHertz;
    double pass = filter(f, width);
    if (pass == 0 || Math.hypot(ringRe, ringIm) < 1e-3 * scenario.receiver().noiseDensity()) {
      return;
    }
    double tau = scenario.coil().ringSeconds();
    double grown = pass * Math.exp(-start / tau);
    double angle = 2 * Math.PI * f * start;
    double c = grown * Math.cos(angle);
    double s = grown * Math.sin(angle);
    addTone(
        re,
        im,
        ringRe * c - ringIm * s,
        ringRe * s + ringIm * c,
        f * dwell,
        Math.exp(-dwell / tau));
  }

  private static void addTone(
      double[] re, double[] im, double aRe, double aIm, double turnsEach, double decay) {
    double c = decay * Math.cos(2 * Math.PI * turnsEach);
    double s = decay * Math.sin(2 * Math.PI * turnsEach);
    double a = aRe;
    double b = aIm;
    double gone = 1e-14 * Math.hypot(aRe, aIm);
    for (int k = 0; k < re.length; k++) {
      re[k] += a;
      im[k] += b;
      double t = a * c - b * s;
      b = a * s + b * c;
      a = t;
      if (decay < 1 && Math.abs(a) + Math.abs(b) < gone) {
        return;
      }
    }
  }

  private static void turn(double[] re, double[] im, double radians) {
    if (radians == 0) {
      return;
    }
    double c = Math.cos(radians);
    double s = Math.sin(radians);
    for (int k = 0; k < re.length; k++) {
      double x = re[k] * c - im[k] * s;
      im[k] = re[k] * s + im[k] * c;
      re[k] = x;
    }
  }

  /** The filter fills during the first samples. */
  private void spoil(double[] re, double[] im) {
    int lost = Math.min(digitiser.lostSamples(), re.length);
    for (int k = 0; k < lost; k++) {
      double s = Math.sin(Math.PI / 2 * k / lost);
      re[k] *= s * s;
      im[k] *= s * s;
    }
  }

  private Counts complex(double[] re, double[] im, double dwell, double gain) {
    Scenario.Receiver r = scenario.receiver();
    double sigma = r.noiseDensity() / Math.sqrt(dwell);
    double cos = (1 + r.gainError()) * Math.cos(r.phaseErrorRadians());
    double sin = (1 + r.gainError()) * Math.sin(r.phaseErrorRadians());
    for (int k = 0; k < re.length; k++) {
      double a = re[k] + sigma * random.nextGaussian();
      double b = im[k] + sigma * random.nextGaussian();
      double q = cos * b + sin * a;
      re[k] = counts(gain * (r.swapped() ? q : a) + r.offsetIVolts());
      im[k] = counts(gain * (r.swapped() ? a : q) + r.offsetQVolts());
    }
    return new Counts(re, im);
  }

  private Counts real(
      double[] re, double[] im, RealSampling sampling, double carrierHertz, double gain) {
    double rate = sampling.rateHertz();
    double turnsEach = sampling.intermediateHertz().orElse(carrierHertz) / rate;
    turnsEach -= Math.floor(turnsEach);
    // Mixed down to one channel of 1/dwell, this noise has the density noiseDensity.
    double sigma = scenario.receiver().noiseDensity() * Math.sqrt(rate / 2);
    for (int k = 0; k < re.length; k++) {
      double turns = turnsEach * k;
      double angle = 2 * Math.PI * (turns - Math.rint(turns));
      double v = re[k] * Math.cos(angle) - im[k] * Math.sin(angle);
      v += sigma * random.nextGaussian();
      re[k] = counts(gain * v + scenario.receiver().offsetIVolts());
    }
    return new Counts(re, new double[0]);
  }

  private double counts(double volts) {
    double rail = scenario.receiver().railVolts();
    return Math.max(-rail, Math.min(rail, volts)) / digitiser.voltsPerCount();
  }
}
