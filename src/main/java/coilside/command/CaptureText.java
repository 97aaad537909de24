package coilside.command;

import coilside.bench.Capture;
import coilside.shot.Shot;
import coilside.signal.Scan;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;

/** What a capture holds, as lines of text. */
final class CaptureText {
  private CaptureText() {}

  static List<String> of(Capture capture) {
    List<String> lines = new ArrayList<>();
    Shot shot = capture.shots().get(capture.shots().size() - 1);
    Scan scan = capture.scans().get(capture.scans().size() - 1);
    lines.add(
        capture.purpose()
            + ", taken "
            + capture.started()
            + " on '"
            + capture.board()
            + "'"
            + (capture.simulated() ? " (simulated bench)" : "")
            + ", sample '"
            + capture.conditions().sample()
            + "'");
    lines.add(
        String.format(
            Locale.ROOT,
            "%d scans, %d receive windows each, %d points, dwell time %.4g us, carrier %.6f MHz,"
                + " gain %.0f dB",
            capture.scans().size(),
            scan.windows().size(),
            scan.fid().points(),
            scan.fid().dwellSeconds() * 1e6,
            shot.carrierHertz() * 1e-6,
            shot.gainDecibels()));
    return lines;
  }
}
