package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.bench.LogRow;
import coilside.record.BenchRecord;
import coilside.record.RecordHeld;
import coilside.record.RecordView;
import java.io.File;
import java.io.IOException;
import java.net.InetAddress;
import java.net.ServerSocket;
import java.net.Socket;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.locks.LockSupport;
import java.util.stream.Collectors;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.Assumptions;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.io.TempDir;

/**
 * A log started over a real SSH session whose client is killed. Needs an SSH server that this user
 * may start on a port of its own; elsewhere it is skipped and says so.
 */
@Tag("machine")
@Timeout(value = 120, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class LogOverSshTest {
  private static final String SERVER = "/usr/sbin/sshd";

  @TempDir Path folder;

  private Process server;
  private int port;

  private static int run(String... command) throws Exception {
    try {
      return new ProcessBuilder(command)
          .redirectErrorStream(true)
          .redirectOutput(ProcessBuilder.Redirect.DISCARD)
          .start()
          .waitFor();
    } catch (IOException e) {
      return -1;
    }
  }

  @BeforeEach
  void startServer() throws Exception {
    Assumptions.assumeTrue(Files.isExecutable(Path.of(SERVER)), "no SSH server is installed");
    String host = folder.resolve("host").toString();
    String user = folder.resolve("user").toString();
    boolean keys =
        run("ssh-keygen", "-q", "-t", "ed25519", "-N", "", "-f", host) == 0
            && run("ssh-keygen", "-q", "-t", "ed25519", "-N", "", "-f", user) == 0;
    Assumptions.assumeTrue(keys, "ssh-keygen does not work here");
    try (ServerSocket free = new ServerSocket(0, 1, InetAddress.getLoopbackAddress())) {
      port = free.getLocalPort();
    }
    server =
        new ProcessBuilder(
                SERVER,
                "-D",
                "-f",
                "/dev/null",
                "-p",
                Integer.toString(port),
                "-h",
                host,
                "-o",
                "ListenAddress=127.0.0.1",
                "-o",
                "AuthorizedKeysFile=" + user + ".pub",
                "-o",
                "StrictModes=no",
                "-o",
                "PidFile=none",
                "-o",
                "PermitRootLogin=prohibit-password")
            .redirectErrorStream(true)
            .redirectOutput(ProcessBuilder.Redirect.DISCARD)
            .start();
    boolean up = false;
    for (int i = 0; i < 100 && !up && server.isAlive(); i++) {
      up = answers();
      LockSupport.parkNanos(50_000_000);
    }
    boolean allowed = up && ssh("true").start().waitFor() == 0;
    Assumptions.assumeTrue(allowed, "no SSH server can be used on a port of its own here");
  }

  private boolean answers() {
    try (Socket socket = new Socket(InetAddress.getLoopbackAddress(), port)) {
      return socket.getInputStream().read() > 0;
    } catch (IOException e) {
      return false;
    }
  }

  @AfterEach
  void stopServer() throws Exception {
    if (server != null) {
      server.destroyForcibly().waitFor();
    }
  }

  private ProcessBuilder ssh(String command) {
    return new ProcessBuilder(
            "ssh",
            "-tt",
            "-p",
            Integer.toString(port),
            "-i",
            folder.resolve("user").toString(),
            "-o",
            "StrictHostKeyChecking=no",
            "-o",
            "UserKnownHostsFile=/dev/null",
            "-o",
            "IdentitiesOnly=yes",
            "-o",
            "BatchMode=yes",
            "127.0.0.1",
            command)
        .redirectErrorStream(true)
        .redirectInput(new File("/dev/null"))
        .redirectOutput(folder.resolve("client.txt").toFile());
  }

  /** Logs over SSH, kills the client after the second row, and waits until the log has ended. */
  private List<LogRow> logAndDrop(Path captures, String... more) throws Exception {
    List<String> arguments =
        new ArrayList<>(
            List.of(
                "log",
                "--every",
                "200ms",
                "--count",
                "25",
                "--scans",
                "1",
                "--captures",
                captures.toString()));
    arguments.addAll(List.of(more));
    String command =
        LogProcess.command(arguments.toArray(new String[0])).command().stream()
            .map(word -> "'" + word + "'")
            .collect(Collectors.joining(" "));
    Process client = ssh(command).start();
    awaitRows(captures, 2, client);
    client.toHandle().destroyForcibly();
    client.waitFor();
    for (int i = 0; i < 600; i++) {
      try (BenchRecord record = BenchRecord.open(captures)) {
        List<LogRow> rows = new ArrayList<>();
        record.view().rows(record.view().runs().get(0).run(), rows::add);
        assertTrue(
            record.view().eventsAfter(0, 1000).stream()
                .anyMatch(e -> e.what().kind().equals("log ended")),
            "the log came to an orderly end");
        return rows;
      } catch (RecordHeld e) {
        TimeUnit.MILLISECONDS.sleep(50);
      }
    }
    throw new AssertionError("the log does not end");
  }

  private void awaitRows(Path captures, long rows, Process client) throws Exception {
    for (int i = 0; i < 600 && client.isAlive(); i++) {
      try (RecordView view = BenchRecord.watch(captures)) {
        if (view.lastRow() >= rows) {
          return;
        }
      }
      TimeUnit.MILLISECONDS.sleep(50);
    }
    throw new AssertionError("no rows came: " + Files.readString(folder.resolve("client.txt")));
  }

  private static long slots(List<LogRow> rows) {
    LogRow last = rows.get(rows.size() - 1);
    String note = last.note();
    long more = note.contains(" slots missed") ? Long.parseLong(note.split(" ")[0]) - 1 : 0;
    return last.number() + 1 + more;
  }

  @Test
  void aRunToBeKeptRunningEndsWithAllRows() throws Exception {
    Path captures = LogProcess.climbed(folder.resolve("captures"));
    List<LogRow> rows = logAndDrop(captures, "--keep-running");
    assertEquals(25, slots(rows), rows.toString());
  }

  @Test
  void anyOtherRunEndsEarlyWithWhatWasFinished() throws Exception {
    Path captures = LogProcess.climbed(folder.resolve("captures"));
    List<LogRow> rows = logAndDrop(captures);
    assertTrue(slots(rows) >= 2 && slots(rows) < 25, rows.toString());
  }
}
