package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.LogRow;
import coilside.board.simulated.FirmwareServer;
import coilside.record.BenchRecord;
import coilside.record.CaptureReader;
import coilside.record.RecordView;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;

/** A cable pulled again and again while the real program logs over it. */
@EnabledOnOs(value = OS.LINUX, disabledReason = "pseudo-terminals are made on Linux only")
@Timeout(value = 300, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class LogCableTest {
  private static final int PULLS = 20;

  @TempDir Path folder;

  private final Path port =
      Path.of(
          System.getProperty("java.io.tmpdir"), "coilside-cable-" + ProcessHandle.current().pid());

  private FirmwareServer plugIn() throws Exception {
    FirmwareServer server =
        FirmwareServer.onPseudoTerminal(
            Simulation.firmware(Profiles.read("scpi-console"), null, 1, false), System::nanoTime);
    Files.deleteIfExists(port);
    Files.createSymbolicLink(port, Path.of(server.address()));
    return server;
  }

  @Test
  void theLogGoesOnAfterEachOfTwentyPulls() throws Exception {
    LogProcess.climbed(folder);
    FirmwareServer server = plugIn();
    try (LogProcess log =
        LogProcess.start(
            "log",
            "--every",
            "200ms",
            "--scans",
            "1",
            "--plain",
            "--board",
            "scpi-console@" + port,
            "--captures",
            folder.toString())) {
      for (int i = 0; i < PULLS; i++) {
        log.await(LogProcess::row);
        server.close();
        Files.delete(port);
        if (i % 2 == 0) {
          // Every second time it stays out until the log has told of it.
          log.await(line -> line.contains("gap:"));
        }
        server = plugIn();
        log.await(LogProcess::row);
      }
      log.signal("TERM");
      assertEquals(130, log.end(), log.lines.toString());
      verify(log);
    } finally {
      server.close();
      Files.deleteIfExists(port);
    }
  }

  private void verify(LogProcess log) throws Exception {
    List<LogRow> rows = new ArrayList<>();
    List<String> events = new ArrayList<>();
    try (BenchRecord record = BenchRecord.open(folder)) {
      RecordView.LogRun run = record.view().runs().get(0);
      record.view().rows(run.run(), rows::add);
      record.view().eventsAfter(0, 1000).forEach(e -> events.add(e.what().kind()));
    }
    List<LogRow> good = rows.stream().filter(r -> !r.values().isEmpty()).toList();
    assertEquals(log.rows().size(), good.size());
    double first = good.get(0).values().get("larmor_frequency").value();
    for (LogRow row : good) {
      assertEquals(first, row.values().get("larmor_frequency").value(), 5, "false: " + row);
      assertEquals(50e-6, row.values().get("amplitude").value(), 2e-6, "false: " + row);
      assertEquals(1, CaptureReader.read(folder.resolve(row.capture())).scans().size());
    }
    long told =
        rows.stream().filter(r -> r.values().isEmpty() || r.note().contains("taken again")).count();
    assertTrue(told >= PULLS / 2, told + " of " + PULLS + " pulls are told in the rows");
    assertTrue(events.contains("log gap") && events.contains("log goes on"), events.toString());
    System.out.println(
        PULLS + " pulls: " + good.size() + " rows, " + (rows.size() - good.size()) + " gap rows");
  }
}
