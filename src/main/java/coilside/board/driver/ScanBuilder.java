package coilside.board.driver;

import coilside.board.BoardException.BadAnswer;
import coilside.board.BoardException.Refused;
import coilside.board.profile.CommandName;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.SampleBlocks;
import coilside.board.profile.SampleFormat;
import coilside.board.profile.ValueName;
import coilside.board.wire.CommandEncoder;
import coilside.board.wire.DownConversion;
import coilside.board.wire.SampleDecoder;
import coilside.shot.Pulse;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.shot.Step;
import coilside.signal.Fid;
import coilside.signal.Scan;
import java.time.Instant;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.OptionalDouble;

/**
 * Turns the sample blocks of one shot into a {@link Scan} in volts at the receiver input, on the
 * time axis and in the sign convention of the signal package.
 */
final class ScanBuilder {
  /** Most sample bytes of one scan that are asked for. */
  private static final long MOST_BYTES = 256L << 20;

  private record Window(Receive receive, int samples, double startSeconds) {}

  private final DeviceProfile profile;
  private final SampleFormat format;
  private final CommandEncoder encoder;
  private final Shot shot;
  private final double extraPhase;
  private final List<Window> windows = new ArrayList<>();
  private final List<Fid> fids = new ArrayList<>();
  private final SampleDecoder decoder;

  ScanBuilder(DeviceProfile profile, ShotWriter writer, CommandEncoder encoder, Shot shot)
      throws Refused {
    this.profile = profile;
    this.format = profile.samples();
    this.encoder = encoder;
    this.shot = shot;
    this.extraPhase = writer.unsaidPhase(shot);
    this.decoder = new SampleDecoder(format);
    double t = 0;
    double zero = Double.NaN;
    long bytes = 0;
    for (Step step : shot.flat()) {
      if (step instanceof Pulse pulse) {
        zero = t + pulse.seconds() / 2;
      } else if (step instanceof Receive receive) {
        int samples = writer.samples(receive);
        windows.add(new Window(receive, samples, Double.isNaN(zero) ? 0 : t - zero));
        bytes += (long) samples * format.bytesPerSample();
        if (pointsOut(samples, receive) < 1) {
          throw new Refused(
              "a receive window of "
                  + receive.points()
                  + " points leaves nothing after the "
                  + format.lostSamples()
                  + " samples lost to the receive filter; take more points");
        }
      }
      t += step.seconds();
    }
    if (bytes > MOST_BYTES) {
      throw new Refused(
          "the scan has "
              + (bytes >> 20)
              + " MB of samples, over the limit of "
              + (MOST_BYTES >> 20)
              + " MB; take fewer points or windows");
    }
  }

  private int decimation(Receive receive) {
    return format
        .real()
        .map(r -> (int) Math.rint(receive.dwellSeconds() * r.rateHertz()))
        .orElse(1);
  }

  private int pointsOut(int samples, Receive receive) {
    int kept = samples - format.lostSamples();
    return format.real().isPresent()
        ? DownConversion.pointsOut(Math.max(0, kept) / decimation(receive))
        : kept;
  }

  /** Lengths of the sample blocks to come, bytes. */
  int[] blockLengths() {
    int[] each = windows.stream().mapToInt(w -> w.samples() * format.bytesPerSample()).toArray();
    return profile.blocks().per() == SampleBlocks.Per.WINDOW
        ? each
        : new int[] {Arrays.stream(each).sum()};
  }

  /** Takes block number {@code index}. */
  void block(int index, byte[] bytes) throws BadAnswer {
    if (profile.blocks().per() == SampleBlocks.Per.WINDOW) {
      window(windows.get(index), bytes, 0);
      return;
    }
    int at = 0;
    for (Window window : windows) {
      window(window, bytes, at);
      at += window.samples() * format.bytesPerSample();
    }
  }

  boolean complete() {
    return fids.size() == windows.size();
  }

  private void window(Window window, byte[] bytes, int offset) throws BadAnswer {
    Receive receive = window.receive();
    double volts = format.voltsPerCount() / Math.pow(10, shot.gainDecibels() / 20);
    double carrier = encoder.asSent(ValueName.CARRIER, shot.carrierHertz());
    if (!profile.values().containsKey(ValueName.CARRIER)) {
      carrier = shot.carrierHertz();
    }
    double turn = extraPhase - (receive.phaseRadians() - phaseOnBoard(receive));
    Fid fid =
        format.real().isPresent()
            ? real(window, bytes, offset, volts, turn, carrier, format.real().get())
            : complex(window, bytes, offset, volts, turn, carrier);
    if (decoder.notNumbers() > 0) {
      throw new BadAnswer("the board sent samples that are not finite numbers.");
    }
    fids.add(fid);
  }

  private double phaseOnBoard(Receive receive) {
    boolean said =
        profile
            .command(profile.fixedShotOnly() ? CommandName.PULSE_AND_RECEIVE : CommandName.RECEIVE)
            .map(c -> c.template().mentions(ValueName.RECEIVE_PHASE))
            .orElse(false);
    return said ? encoder.asSent(ValueName.RECEIVE_PHASE, receive.phaseRadians()) : 0;
  }

  private Fid complex(
      Window window, byte[] bytes, int offset, double volts, double turn, double carrier) {
    int n = window.samples();
    double[] re = new double[n];
    double[] im = new double[n];
    int lost = format.lostSamples();
    // Lost samples hold rubbish; only kept ones may count for the ADC level.
    if (lost == 0 || format.layout() == SampleFormat.Layout.PLANAR) {
      decoder.complex(bytes, offset, n, re, im);
      re = lost == 0 ? re : Arrays.copyOfRange(re, lost, n);
      im = lost == 0 ? im : Arrays.copyOfRange(im, lost, n);
    } else {
      re = new double[n - lost];
      im = new double[n - lost];
      decoder.complex(bytes, offset + lost * format.bytesPerSample(), n - lost, re, im);
    }
    scale(re, im, re.length, volts, turn);
    double dwell = window.receive().dwellSeconds();
    double start = window.startSeconds() + (lost - format.filterDelaySamples()) * dwell;
    return new Fid(re, im, dwell, start, carrier);
  }

  private Fid real(
      Window window,
      byte[] bytes,
      int offset,
      double volts,
      double turn,
      double carrier,
      SampleFormat.RealSampling sampling) {
    int lost = format.lostSamples();
    int kept = window.samples() - lost;
    double[] raw = new double[kept];
    decoder.real(bytes, offset + lost * format.bytesPerSample(), kept, raw);
    double intermediate = sampling.intermediateHertz().orElse(carrier);
    DownConversion conversion =
        new DownConversion(sampling.rateHertz(), intermediate, decimation(window.receive()));
    int n = pointsOut(window.samples(), window.receive());
    double[] re = new double[n];
    double[] im = new double[n];
    conversion.convert(raw, kept, re, im);
    // The mixing starts at the first kept sample; its phase is counted from the window's first.
    double late = -2 * Math.PI * intermediate * lost / sampling.rateHertz();
    scale(re, im, n, volts, turn + late);
    double start =
        window.startSeconds()
            + (conversion.firstSample() + lost - format.filterDelaySamples())
                / sampling.rateHertz();
    return new Fid(re, im, window.receive().dwellSeconds(), start, carrier);
  }

  private static void scale(double[] re, double[] im, int n, double volts, double turn) {
    double c = volts * Math.cos(turn);
    double s = volts * Math.sin(turn);
    for (int k = 0; k < n; k++) {
      double a = re[k];
      double b = im[k];
      re[k] = a * c - b * s;
      im[k] = a * s + b * c;
    }
  }

  Scan scan(Instant started, double restSeconds) {
    return new Scan(
        fids,
        decoder.peakFraction(),
        (int) Math.min(Integer.MAX_VALUE, decoder.clipped()),
        started,
        restSeconds,
        OptionalDouble.empty(),
        0);
  }
}
