package coilside.terminal;

import com.sun.jna.LastErrorException;
import com.sun.jna.Memory;
import com.sun.jna.Native;
import com.sun.jna.NativeLong;
import com.sun.jna.Pointer;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.concurrent.TimeUnit;

/**
 * The real program in a process of its own on a pseudo-terminal that is its controlling terminal,
 * as a terminal window starts it. Linux only.
 */
final class RealTerminal implements AutoCloseable {
  private static final int O_RDWR = 2;
  private static final int O_NOCTTY = 0x100;

  /** The C library's functions used here. */
  private static final class C {
    static {
      Native.register(C.class, "c");
    }

    static native int posix_openpt(int flags) throws LastErrorException;

    static native int grantpt(int fd) throws LastErrorException;

    static native int unlockpt(int fd) throws LastErrorException;

    static native int ptsname_r(int fd, Pointer name, NativeLong length) throws LastErrorException;

    static native int open(String path, int flags) throws LastErrorException;

    static native int close(int fd) throws LastErrorException;

    static native NativeLong read(int fd, Pointer into, NativeLong n) throws LastErrorException;

    static native NativeLong write(int fd, Pointer from, NativeLong n) throws LastErrorException;
  }

  final EmulatedTerminal screen;
  final Process program;
  private final String path;
  private final int master;
  private final int slave;
  private final Object gate = new Object();
  private final Thread reader;
  private boolean frozen;
  private long bytesASecond;
  private volatile boolean closed;

  RealTerminal(int width, int height, Map<String, String> environment, List<String> arguments)
      throws Exception {
    screen = new EmulatedTerminal(width, height);
    master = C.posix_openpt(O_RDWR | O_NOCTTY);
    C.grantpt(master);
    C.unlockpt(master);
    Memory name = new Memory(256);
    C.ptsname_r(master, name, new NativeLong(256));
    path = name.getString(0);
    // Kept open, so that its settings can be looked at after the program has gone.
    slave = C.open(path, O_RDWR | O_NOCTTY);
    size(width, height);
    List<String> command = new ArrayList<>(List.of("setsid", "-c"));
    command.addAll(
        List.of(
            Path.of(System.getProperty("java.home"), "bin", "java").toString(),
            "-XX:TieredStopAtLevel=1",
            "-Xmx512m",
            "-cp",
            System.getProperty("java.class.path"),
            "coilside.Main"));
    command.addAll(arguments);
    ProcessBuilder builder = new ProcessBuilder(command);
    builder.environment().keySet().removeAll(List.of("NO_COLOR", "SSH_CONNECTION", "SSH_TTY"));
    builder.environment().put("TERM", "xterm-256color");
    builder.environment().put("LC_ALL", "C.UTF-8");
    builder.environment().putAll(environment);
    java.io.File file = Path.of(path).toFile();
    program = builder.redirectInput(file).redirectOutput(file).redirectError(file).start();
    reader = new Thread(this::readAll, "terminal reader");
    reader.setDaemon(true);
    reader.start();
  }

  private void readAll() {
    Memory buffer = new Memory(4096);
    byte[] bytes = new byte[4096];
    while (!closed) {
      int n;
      try {
        synchronized (gate) {
          while (frozen) {
            gate.wait();
          }
        }
        n = C.read(master, buffer, new NativeLong(bytes.length)).intValue();
        if (bytesASecond > 0) {
          TimeUnit.MICROSECONDS.sleep(n * 1_000_000L / bytesASecond);
        }
      } catch (LastErrorException | InterruptedException e) {
        return;
      }
      if (n > 0) {
        buffer.read(0, bytes, 0, n);
        screen.take(bytes, n);
      }
    }
  }

  /** Takes no more output until {@link #thaw}, as a window does after Ctrl-S. */
  void freeze() {
    synchronized (gate) {
      frozen = true;
    }
  }

  void thaw() {
    synchronized (gate) {
      frozen = false;
      gate.notifyAll();
    }
  }

  /** Carries only so many bytes a second from now on. */
  void slow(long limit) {
    bytesASecond = limit;
  }

  void type(String keys) {
    byte[] bytes = keys.getBytes(StandardCharsets.UTF_8);
    Memory m = new Memory(bytes.length);
    m.write(0, bytes, 0, bytes.length);
    C.write(master, m, new NativeLong(bytes.length));
  }

  /** Changes the window's size; the system tells the program. */
  void size(int width, int height) throws Exception {
    stty("cols", Integer.toString(width), "rows", Integer.toString(height));
    screen.size(width, height);
  }

  /** All settings of the terminal. */
  String settings() throws Exception {
    return stty("-a");
  }

  private String stty(String... words) throws Exception {
    List<String> command = new ArrayList<>(List.of("stty", "-F", path));
    command.addAll(List.of(words));
    Process p = new ProcessBuilder(command).redirectErrorStream(true).start();
    String out = new String(p.getInputStream().readAllBytes(), StandardCharsets.UTF_8);
    if (p.waitFor() != 0) {
      throw new IllegalStateException(out);
    }
    return out;
  }

  /** The exit status, or -1 when it does not end in time. */
  int ended(int seconds) throws InterruptedException {
    return program.waitFor(seconds, TimeUnit.SECONDS) ? program.exitValue() : -1;
  }

  /** Closes the window: the program gets a hang-up. */
  void hangUp() {
    if (!closed) {
      closed = true;
      thaw();
      C.close(slave);
      C.close(master);
    }
  }

  @Override
  public void close() {
    program.destroyForcibly();
    hangUp();
  }
}
