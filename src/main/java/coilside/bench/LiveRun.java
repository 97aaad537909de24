package coilside.bench;

import coilside.board.BoardException;
import coilside.shot.Receive;
import coilside.shot.Shot;
import coilside.signal.Averager;
import coilside.signal.Fid;
import coilside.signal.Fourier;
import coilside.signal.Scan;
import java.util.List;
import java.util.Optional;
import java.util.OptionalDouble;
import java.util.function.BooleanSupplier;

/** Live running for tuning and shimming: scan after scan, a running average, nothing kept. */
final class LiveRun {
  private static final int POINTS = 4096;
  private static final int MOST_POINTS = 8192;
  private static final double UNKNOWN_T2_STAR = 10e-3;

  /** Record length in T2*: a little short of what a measurement takes, for the sake of the pace. */
  private static final double RECORD = 4;

  private final Acquisition a;
  private final Work.Live request;
  private final BooleanSupplier stopped;
  private final Choices.Window window;

  LiveRun(Acquisition a, Work.Live request, BooleanSupplier stopped) {
    this.a = a;
    this.request = request;
    this.stopped = stopped;
    this.window = window(a);
  }

  void run() throws BoardException {
    Averager average = Averager.rolling(request.memoryScans());
    int number = 0;
    while (!stopped.getAsBoolean()) {
      Shot shot = request.transmit() ? pulse(number) : listen();
      Scan scan = a.playAside(shot);
      average.add(scan.fid(), BenchShots.firstPhase(shot));
      number++;
      a.show(request.transmit() ? decay(average.mean(), scan) : noise(average.mean()));
    }
  }

  private Shot pulse(int number) {
    return DecayMethod.shot(
        a, number, "", window.points(), window.dwellSeconds(), OptionalDouble.empty());
  }

  /** As T2* advises; long enough for most magnets where it is not known. */
  private static Choices.Window window(Acquisition a) {
    double t2Star = a.known().value(Rung.T2STAR, "t2_star").orElse(UNKNOWN_T2_STAR);
    double longest = 0.9 * a.limits().maxReceiveSeconds();
    return Choices.window(a.limits(), Math.min(longest, RECORD * t2Star), MOST_POINTS);
  }

  private Shot listen() {
    double dwell = Choices.wideDwell(a.limits());
    return new Shot(
        Choices.carrier(a),
        Choices.gain(a),
        0,
        List.of(new Receive(Choices.points(a.limits(), POINTS), dwell, 0)));
  }

  private Picture decay(Fid fid, Scan scan) {
    try {
      return Readings.decay(fid, List.of(scan), Double.NaN).picture();
    } catch (NotMeasurable e) {
      return new Picture.Trace(
          Rung.T2STAR,
          fid,
          Optional.empty(),
          0,
          Optional.of(Fourier.spectrum(fid)),
          List.of(),
          "no decay to fit: " + e.getMessage());
    }
  }

  private static Picture noise(Fid fid) {
    return new Picture.Trace(
        Rung.NOISE,
        fid,
        Optional.empty(),
        0,
        Optional.of(Fourier.spectrum(fid)),
        List.of(),
        "live noise, transmitter off");
  }
}
