package coilside.record;

import coilside.bench.KeepException;
import coilside.bench.LogRow;
import coilside.quantity.Measured;
import coilside.quantity.Unit;
import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.channels.FileChannel;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
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
  private final FileChannel channel;

  private LogCsv(Path file, FileChannel channel) {
    this.file = file;
    this.channel = channel;
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
      FileChannel channel =
          FileChannel.open(
              file, StandardOpenOption.CREATE, StandardOpenOption.READ, StandardOpenOption.WRITE);
      try {
        LogCsv csv = new LogCsv(file, channel);
        csv.start();
        return csv;
      } catch (IOException | KeepException e) {
        channel.close();
        throw e;
      }
    } catch (IOException e) {
      throw Trouble.with("cannot write the log to", file, e);
    }
  }

  private void start() throws IOException, KeepException {
    byte[] header = header().getBytes(StandardCharsets.UTF_8);
    ByteBuffer there = ByteBuffer.allocate((int) Math.min(header.length, channel.size()));
    while (there.hasRemaining() && channel.read(there, there.position()) >= 0) {
      continue;
    }
    if (!ByteBuffer.wrap(header, 0, there.position()).equals(there.flip())) {
      throw new KeepException(
          "cannot append the log to "
              + file
              + ": it holds something other than a log of this form; name a new file");
    }
    if (there.limit() < header.length) {
      channel.truncate(0);
      write(header());
      return;
    }
    long end = channel.size();
    ByteBuffer one = ByteBuffer.allocate(1);
    while (end > header.length) {
      one.clear();
      channel.read(one, end - 1);
      if (one.get(0) == '\n') {
        break;
      }
      end--;
    }
    channel.truncate(end);
    channel.position(end);
  }

  /** Appends a row. */
  public void add(LogRow row) throws KeepException {
    try {
      write(line(row));
      channel.force(false);
    } catch (IOException e) {
      throw Trouble.with("cannot write the log to", file, e);
    }
  }

  /** Writes all rows of a run to a new file. */
  public static void export(RecordView view, String run, Path file) throws KeepException {
    try (FileChannel channel =
        FileChannel.open(file, StandardOpenOption.CREATE_NEW, StandardOpenOption.WRITE)) {
      LogCsv csv = new LogCsv(file, channel);
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
      channel.force(true);
    } catch (IOException e) {
      throw Trouble.with("cannot export the log to", file, e);
    }
  }

  private void write(String text) throws IOException {
    ByteBuffer bytes = ByteBuffer.wrap(text.getBytes(StandardCharsets.UTF_8));
    while (bytes.hasRemaining()) {
      channel.write(bytes);
    }
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
      channel.close();
    } catch (IOException e) {
      throw Trouble.with("cannot close the log", file, e);
    }
  }
}
