package coilside.record;

import coilside.bench.Capture;
import coilside.signal.Fid;
import coilside.signal.Scan;
import coilside.signal.Spectrum;
import java.io.IOException;
import java.io.OutputStream;
import java.nio.charset.StandardCharsets;

/** FIDs and spectra as CSV (RFC 4180), units in the header, every digit kept. */
final class TableWriter {
  private TableWriter() {}

  static void fids(Capture capture, OutputStream out) throws IOException {
    line(out, "scan,window,time [s],real [V],imaginary [V]");
    for (int s = 0; s < capture.scans().size(); s++) {
      Scan scan = capture.scans().get(s);
      for (int w = 0; w < scan.windows().size(); w++) {
        Fid fid = scan.windows().get(w);
        for (int k = 0; k < fid.points(); k++) {
          line(out, s + "," + w + "," + fid.time(k) + "," + fid.re(k) + "," + fid.im(k));
        }
      }
    }
  }

  static void spectrum(Spectrum spectrum, OutputStream out) throws IOException {
    line(out, "offset [Hz],frequency [Hz],real [V],imaginary [V]");
    for (int k = 0; k < spectrum.points(); k++) {
      double offset = spectrum.offsetHertz(k);
      line(
          out,
          offset
              + ","
              + (spectrum.carrierHertz() + offset)
              + ","
              + spectrum.re()[k]
              + ","
              + spectrum.im()[k]);
    }
  }

  private static void line(OutputStream out, String text) throws IOException {
    out.write(text.getBytes(StandardCharsets.US_ASCII));
    out.write('\r');
    out.write('\n');
  }
}
