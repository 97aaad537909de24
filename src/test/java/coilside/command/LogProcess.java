package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;

import coilside.Main;
import java.io.BufferedReader;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.BlockingQueue;
import java.util.concurrent.LinkedBlockingQueue;
import java.util.concurrent.TimeUnit;
import java.util.function.Predicate;
import java.util.stream.Stream;

/** The real program in a process of its own, whose output is read as it comes. */
final class LogProcess implements AutoCloseable {
  private static final String END = "\u0004";
  private static final int PATIENCE_SECONDS = 60;
  private static Path ready;

  final Process process;
  final List<String> lines = new ArrayList<>();
  private final BlockingQueue<String> queue = new LinkedBlockingQueue<>();
  private final Thread reader = new Thread(this::read, "reader");

  private LogProcess(Process process) {
    this.process = process;
    reader.setDaemon(true);
    reader.start();
  }

  /** Starts the program; its two outputs come as one. */
  static LogProcess start(String... arguments) throws IOException {
    return new LogProcess(command(arguments).redirectErrorStream(true).start());
  }

  static ProcessBuilder command(String... arguments) {
    List<String> command =
        new ArrayList<>(
            List.of(
                Path.of(System.getProperty("java.home"), "bin", "java").toString(),
                "-XX:TieredStopAtLevel=1",
                "-Xshare:auto",
                "-cp",
                System.getProperty("java.class.path"),
                Main.class.getName()));
    command.addAll(List.of(arguments));
    return new ProcessBuilder(command);
  }

  private void read() {
    try (BufferedReader out = process.inputReader(StandardCharsets.UTF_8)) {
      String line;
      while ((line = out.readLine()) != null) {
        queue.add(line);
      }
    } catch (IOException e) {
      // The process was killed while its last line came.
    }
    queue.add(END);
  }

  /** Waits for the next such line. */
  String await(Predicate<String> wanted) throws InterruptedException {
    while (true) {
      String line = queue.poll(PATIENCE_SECONDS, TimeUnit.SECONDS);
      if (line == null || line.equals(END)) {
        throw new AssertionError("the awaited line did not come after: " + lines);
      }
      lines.add(line);
      if (wanted.test(line)) {
        return line;
      }
    }
  }

  /** True for a row with values. */
  static boolean row(String line) {
    return line.contains("MHz") && line.contains("SNR");
  }

  void signal(String name) throws Exception {
    assertEquals(
        0, new ProcessBuilder("kill", "-" + name, Long.toString(process.pid())).start().waitFor());
  }

  /** What the program's threads do, for a failure's report. */
  private String threads() {
    try {
      Process dump =
          new ProcessBuilder(
                  Path.of(System.getProperty("java.home"), "bin", "jstack").toString(),
                  Long.toString(process.pid()))
              .redirectErrorStream(true)
              .start();
      return new String(dump.getInputStream().readAllBytes(), StandardCharsets.UTF_8);
    } catch (IOException e) {
      return "not to be had: " + e.getMessage();
    }
  }

  /** Waits for the end, with all lines read, and gives the exit status. */
  int end() throws InterruptedException {
    if (!process.waitFor(PATIENCE_SECONDS, TimeUnit.SECONDS)) {
      queue.drainTo(lines);
      throw new AssertionError(
          "the program does not end: "
              + lines.subList(Math.max(0, lines.size() - 5), lines.size())
              + "\nwhat its threads do:\n"
              + threads());
    }
    reader.join(TimeUnit.SECONDS.toMillis(PATIENCE_SECONDS));
    queue.drainTo(lines);
    lines.remove(END);
    return process.exitValue();
  }

  List<String> rows() {
    return lines.stream().filter(LogProcess::row).toList();
  }

  @Override
  public void close() {
    process.toHandle().destroyForcibly();
  }

  /** A captures folder in which the ladder was climbed on the simulated bench. */
  static synchronized Path climbed(Path into) throws IOException {
    if (ready == null) {
      Path folder = Files.createTempDirectory("coilside-test-ready");
      CommandRun run = CommandRun.of("ready", "--captures", folder.toString(), "--plain");
      assertEquals(0, run.status(), run.err());
      ready = folder;
      Runtime.getRuntime().addShutdownHook(new Thread(() -> delete(folder)));
    }
    Files.createDirectories(into);
    try (Stream<Path> files = Files.list(ready)) {
      for (Path file : files.toList()) {
        Files.copy(file, into.resolve(file.getFileName()));
      }
    }
    return into;
  }

  private static void delete(Path folder) {
    try (Stream<Path> files = Files.list(folder)) {
      for (Path file : files.toList()) {
        Files.delete(file);
      }
      Files.delete(folder);
    } catch (IOException e) {
      // Left to the system's cleaning of its temporary folder.
    }
  }
}
