package coilside.record;

import coilside.bench.KeepException;
import coilside.bench.LogRow;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.io.IOException;
import java.io.RandomAccessFile;
import java.nio.charset.StandardCharsets;
import java.nio.file.FileAlreadyExistsException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.Map;

/**
 * A CSV file (RFC 4180) that takes log rows as they come, and the export of a finished log, which
 * gives the same bytes. Units stand in the header; after each value comes its standard uncertainty,
 * empty where there is none. A gap is a row without values whose note says why.
 *
 * <p>One thread at a time. A row is on the disk when {@link #add} returns.
 */
public final class LogCsv implements AutoCloseable {
  private static final Map<String, Unit> COLUMNS = columns();

  private final Path file;
  private final RandomAccessFile out;

  private LogCsv(Path file, RandomAccessFile out) {
    this.file = file;
    this.out = out;
  }

  private static Map<String, Unit> columns() {
    Map<String, Unit> out = new LinkedHashMap<>();
    out.put("larmor_frequency", Unit.HERTZ);
    out.put("field", Unit.TESLA);
    out.put("amplitude", Unit.VOLT);
    out.put("linewidth", Unit.HERTZ);
    out.put("t2_star", Unit.SECOND);
    out.put("snr", Unit.ONE);
    return out;
  }

  /**
   * Opens a file to append to, or makes it with its header. A last line cut short by a kill is
   * taken away.
   *
   * @throws KeepException when the file cannot be written or holds something else
   */
  public static LogCsv open(Path file) throws KeepException {
    try {
      RandomAccessFile out = new RandomAccessFile(file.toFile(), "rw");
      try {
        LogCsv csv = new LogCsv(file, out);
        csv.start();
        return csv;
      } catch (IOException | KeepException e) {
        out.close();
        throw e;
      }
    } catch (IOException e) {
      throw Trouble.with("cannot write the log to", file, e);
    }
  }

  private void start() throws IOException, KeepException {
    byte[] header = header().getBytes(StandardCharsets.UTF_8);
    byte[] there = new byte[(int) Math.min(header.length, out.length())];
    out.readFully(there);
    if (!Arrays.equals(header, 0, there.length, there, 0, there.length)) {
      throw new KeepException(
          "cannot append the log to "
              + file
              + ": it holds something other than a log of this form; name a new file");
    }
    if (there.length < header.length) {
      out.setLength(0);
      write(header());
      return;
    }
    long end = out.length();
    while (end > header.length) {
      out.seek(end - 1);
      if (out.read() == '\n') {
        break;
      }
      end--;
    }
    out.setLength(end);
    out.seek(end);
  }

  /** Appends a row. */
  public void add(LogRow row) throws KeepException {
    try {
      write(line(row));
      out.getFD().sync();
    } catch (IOException e) {
      throw Trouble.with("cannot write the log to", file, e);
    }
  }

  /** Writes all rows of a run to a new file. */
  public static void export(RecordView view, String run, Path file) throws KeepException {
    try {
      Files.createFile(file);
    } catch (FileAlreadyExistsException e) {
      throw new KeepException(
          "cannot export to " + file + ": that file exists; name another or remove it", e);
    } catch (IOException e) {
      throw Trouble.with("cannot export the log to", file, e);
    }
    try (RandomAccessFile out = new RandomAccessFile(file.toFile(), "rw")) {
      LogCsv csv = new LogCsv(file, out);
      csv.write(header());
      StringBuilder page = new StringBuilder();
      IOException[] failed = new IOException[1];
      view.rows(
          run,
          row -> {
            page.append(line(row));
            if (page.length() > 100_000 && failed[0] == null) {
              try {
                csv.write(page.toString());
              } catch (IOException e) {
                failed[0] = e;
              }
              page.setLength(0);
            }
          });
      if (failed[0] != null) {
        throw failed[0];
      }
      csv.write(page.toString());
      out.getFD().sync();
    } catch (IOException e) {
      throw Trouble.with("cannot export the log to", file, e);
    }
  }

  private void write(String text) throws IOException {
    out.write(text.getBytes(StandardCharsets.UTF_8));
  }

  /** The header line. */
  static String header() {
    StringBuilder out = new StringBuilder("run,number,due_utc,started_utc");
    COLUMNS.forEach(
        (name, unit) -> {
          String label = name + " [" + unit.symbol() + "]";
          out.append(',').append(label).append(",u(").append(name).append(") [");
          out.append(unit.symbol()).append(']');
        });
    return out.append(",temperature [degC],retries,note,capture\r\n").toString();
  }

  private static String line(LogRow row) {
    StringBuilder out = new StringBuilder();
    out.append(Csv.text(row.run())).append(',').append(row.number());
    out.append(',').append(Words.utc(row.due())).append(',').append(Words.utc(row.started()));
    for (String name : COLUMNS.keySet()) {
      Measured m = row.values().get(name);
      out.append(',').append(m == null ? "" : Csv.number(m.value()));
      out.append(',').append(m == null ? "" : Csv.number(m.u()));
    }
    out.append(',');
    row.temperatureCelsius().ifPresent(t -> out.append(Csv.number(t)));
    out.append(',').append(row.retries()).append(',').append(Csv.text(row.note()));
    return out.append(',').append(Csv.text(row.capture())).append("\r\n").toString();
  }

  @Override
  public void close() throws KeepException {
    try {
      out.close();
    } catch (IOException e) {
      throw Trouble.with("cannot close the log", file, e);
    }
  }
}
