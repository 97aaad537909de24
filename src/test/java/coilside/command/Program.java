package coilside.command;

import java.io.File;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;

/** The program in a process of its own, with folders of its own. */
final class Program implements AutoCloseable {
  private static final long PATIENCE_SECONDS = 90;

  private final Process process;
  private final Path out;
  private final Path err;

  private Program(Process process, Path out, Path err) {
    this.process = process;
    this.out = out;
    this.err = err;
  }

  /** Starts it with these arguments; everything it leaves behind goes into the folder. */
  static Program start(Path folder, String... arguments) throws IOException {
    return start(folder, new File("/dev/null"), arguments);
  }

  static Program start(Path folder, File input, String... arguments) throws IOException {
    List<String> command = new ArrayList<>();
    command.add(Path.of(System.getProperty("java.home"), "bin", "java").toString());
    command.add("-XX:TieredStopAtLevel=1");
    command.add("-Duser.home=" + folder);
    command.add("-cp");
    command.add(System.getProperty("java.class.path"));
    command.add("coilside.Main");
    command.addAll(List.of(arguments));
    return run(folder, input, command);
  }

  static Program run(Path folder, File input, List<String> command) throws IOException {
    Path out = Files.createTempFile(folder, "out", ".txt");
    Path err = Files.createTempFile(folder, "err", ".txt");
    ProcessBuilder builder = new ProcessBuilder(command);
    builder.environment().put("XDG_CACHE_HOME", folder.resolve("cache").toString());
    builder.environment().put("XDG_RUNTIME_DIR", folder.resolve("runtime").toString());
    builder.redirectInput(input);
    builder.redirectOutput(out.toFile());
    builder.redirectError(err.toFile());
    return new Program(builder.start(), out, err);
  }

  /** Waits for its first line, such as the address of a simulated board. */
  String firstLine() throws Exception {
    long until = System.nanoTime() + TimeUnit.SECONDS.toNanos(PATIENCE_SECONDS);
    while (System.nanoTime() < until) {
      String text = Files.readString(out);
      if (text.contains("\n")) {
        return text.substring(0, text.indexOf('\n'));
      }
      if (process.waitFor(20, TimeUnit.MILLISECONDS)) {
        break;
      }
    }
    throw new AssertionError("it said nothing: " + Files.readString(err));
  }

  /** Waits for its end. */
  CommandRun ended() throws Exception {
    if (!process.waitFor(PATIENCE_SECONDS, TimeUnit.SECONDS)) {
      process.destroyForcibly();
      throw new AssertionError("it did not end: " + Files.readString(err));
    }
    return new CommandRun(process.exitValue(), Files.readString(out), Files.readString(err));
  }

  /** Asks it to end, as a service manager does. */
  void terminate() {
    process.destroy();
  }

  long pid() {
    return process.pid();
  }

  @Override
  public void close() {
    process.destroyForcibly();
  }
}
