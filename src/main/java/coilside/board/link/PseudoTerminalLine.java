package coilside.board.link;

import coilside.board.link.LinkException.Kind;
import com.sun.jna.LastErrorException;
import com.sun.jna.Memory;
import com.sun.jna.Native;
import com.sun.jna.NativeLong;
import com.sun.jna.Platform;
import com.sun.jna.Pointer;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;

/**
 * The controlling side of a pseudo-terminal, raw and non-blocking, through JNA; the only class that
 * knows that library. Linux only.
 *
 * <p>It keeps a descriptor of the other side open, else reading would fail with errno 5 whenever a
 * program closes that side. The descriptors are closed by whoever leaves last, so that none is
 * closed, and its number given to another file, while a thread still uses it.
 */
final class PseudoTerminalLine {
  private static final int O_RDWR = 2;
  private static final int O_NOCTTY = 0x100;
  private static final int O_NONBLOCK = 0x800;
  private static final short POLLIN = 1;
  private static final short POLLOUT = 4;
  private static final int TCSANOW = 0;
  private static final int TCIFLUSH = 0;
  private static final int EINTR = 4;
  private static final int EAGAIN = 11;
  private static final int POLL_ENTRY_BYTES = 8;
  private static final int TERMIOS_BYTES = 256;
  private static final int SLICE_BYTES = 1 << 16;

  /** The C library's functions used here. */
  private static final class C {
    static {
      System.setProperty("jna.tmpdir", NativeFolder.folder().toString());
      Native.register(C.class, "c");
    }

    private C() {}

    static native int posix_openpt(int flags) throws LastErrorException;

    static native int grantpt(int fd) throws LastErrorException;

    static native int unlockpt(int fd) throws LastErrorException;

    static native int ptsname_r(int fd, Pointer name, NativeLong length) throws LastErrorException;

    static native int open(String path, int flags) throws LastErrorException;

    static native int close(int fd) throws LastErrorException;

    static native int pipe(Pointer two) throws LastErrorException;

    static native NativeLong read(int fd, Pointer into, NativeLong n) throws LastErrorException;

    static native NativeLong write(int fd, Pointer from, NativeLong n) throws LastErrorException;

    static native int poll(Pointer entries, NativeLong count, int milliseconds)
        throws LastErrorException;

    static native int tcgetattr(int fd, Pointer termios) throws LastErrorException;

    static native int tcsetattr(int fd, int when, Pointer termios) throws LastErrorException;

    static native void cfmakeraw(Pointer termios);

    static native int tcflush(int fd, int which) throws LastErrorException;
  }

  private final int master;
  private final int slave;
  private final int wakeRead;
  private final int wakeWrite;
  private final Path path;
  private final Memory readBuffer = new Memory(SLICE_BYTES);
  private final Memory writeBuffer = new Memory(SLICE_BYTES);
  private int inside;
  private boolean released;

  private PseudoTerminalLine(int master, int slave, int wakeRead, int wakeWrite, Path path) {
    this.master = master;
    this.slave = slave;
    this.wakeRead = wakeRead;
    this.wakeWrite = wakeWrite;
    this.path = path;
  }

  /** Makes a pseudo-terminal in raw mode. */
  static PseudoTerminalLine open() throws LinkException {
    try {
      if (!Platform.isLinux()) {
        throw unusable("this works on Linux only", null);
      }
      NativeFolder.ensure(NativeFolder.folder());
      return make();
    } catch (LinkageError e) {
      throw unusable(String.valueOf(e.getMessage()).replaceAll("\\p{Cntrl}", " "), e);
    } catch (LastErrorException e) {
      throw unusable("system error " + e.getErrorCode(), e);
    }
  }

  private static LinkException unusable(String why, Throwable cause) {
    return new LinkException(
        Kind.UNUSABLE,
        "cannot make a pseudo-terminal: " + why + "; serve the board on TCP instead",
        cause);
  }

  private static PseudoTerminalLine make() {
    int master = -1;
    int slave = -1;
    boolean done = false;
    try {
      master = C.posix_openpt(O_RDWR | O_NOCTTY | O_NONBLOCK);
      C.grantpt(master);
      C.unlockpt(master);
      Memory name = new Memory(128);
      C.ptsname_r(master, name, new NativeLong(name.size()));
      String path = name.getString(0, StandardCharsets.US_ASCII.name());
      slave = C.open(path, O_RDWR | O_NOCTTY);
      Memory termios = new Memory(TERMIOS_BYTES);
      termios.clear();
      C.tcgetattr(slave, termios);
      C.cfmakeraw(termios);
      C.tcsetattr(slave, TCSANOW, termios);
      Memory two = new Memory(8);
      C.pipe(two);
      PseudoTerminalLine line =
          new PseudoTerminalLine(master, slave, two.getInt(0), two.getInt(4), Path.of(path));
      done = true;
      return line;
    } finally {
      if (!done) {
        closeQuietly(slave);
        closeQuietly(master);
      }
    }
  }

  private static void closeQuietly(int fd) {
    if (fd >= 0) {
      try {
        C.close(fd);
      } catch (LastErrorException e) {
        // Nothing can be done about a descriptor that does not close.
      }
    }
  }

  /** The side to be opened by others: "/dev/pts/4". */
  Path path() {
    return path;
  }

  /**
   * Waits for bytes written by the other side.
   *
   * @return how many came; 0 when the time passed; -1 when released
   */
  int read(byte[] into, int milliseconds) throws IOException {
    if (!enter()) {
      return -1;
    }
    try {
      if (!ready(POLLIN, milliseconds)) {
        return released() ? -1 : 0;
      }
      int n = C.read(master, readBuffer, room(Math.min(into.length, SLICE_BYTES))).intValue();
      readBuffer.read(0, into, 0, n);
      return n;
    } catch (LastErrorException e) {
      return again(e);
    } finally {
      leave();
    }
  }

  /**
   * Writes what the other side has room for.
   *
   * @return how many bytes were taken; 0 when there was no room in time; -1 when released
   */
  int write(byte[] from, int offset, int length, int milliseconds) throws IOException {
    if (!enter()) {
      return -1;
    }
    try {
      if (!ready(POLLOUT, milliseconds)) {
        return released() ? -1 : 0;
      }
      int n = Math.min(length, SLICE_BYTES);
      writeBuffer.write(0, from, offset, n);
      return C.write(master, writeBuffer, room(n)).intValue();
    } catch (LastErrorException e) {
      return again(e);
    } finally {
      leave();
    }
  }

  /** Drops what was written and not yet read by the other side. */
  void dropUnread() throws IOException {
    if (!enter()) {
      return;
    }
    try {
      C.tcflush(slave, TCIFLUSH);
    } catch (LastErrorException e) {
      throw new IOException("system error " + e.getErrorCode(), e);
    } finally {
      leave();
    }
  }

  private static int again(LastErrorException e) throws IOException {
    if (e.getErrorCode() == EAGAIN || e.getErrorCode() == EINTR) {
      return 0;
    }
    throw new IOException("system error " + e.getErrorCode(), e);
  }

  private static NativeLong room(int n) {
    return new NativeLong(n);
  }

  private boolean ready(short events, int milliseconds) {
    try (Memory entries = new Memory(2 * POLL_ENTRY_BYTES)) {
      entries.setInt(0, master);
      entries.setShort(4, events);
      entries.setShort(6, (short) 0);
      entries.setInt(POLL_ENTRY_BYTES, wakeRead);
      entries.setShort(POLL_ENTRY_BYTES + 4, POLLIN);
      entries.setShort(POLL_ENTRY_BYTES + 6, (short) 0);
      int n = C.poll(entries, new NativeLong(2), milliseconds);
      return n > 0 && entries.getShort(6) != 0 && entries.getShort(POLL_ENTRY_BYTES + 6) == 0;
    }
  }

  private synchronized boolean enter() {
    if (released) {
      return false;
    }
    inside++;
    return true;
  }

  private synchronized void leave() {
    inside--;
    if (released && inside == 0) {
      closeAll();
    }
  }

  private synchronized boolean released() {
    return released;
  }

  /** Frees blocked calls and lets the line go; the other side sees a hang-up. */
  synchronized void release() {
    if (released) {
      return;
    }
    released = true;
    if (inside == 0) {
      closeAll();
    } else {
      try (Memory one = new Memory(1)) {
        one.setByte(0, (byte) 1);
        C.write(wakeWrite, one, new NativeLong(1));
      } catch (LastErrorException e) {
        // The waiting calls then end with their own time limits.
      }
    }
  }

  private void closeAll() {
    closeQuietly(slave);
    closeQuietly(master);
    closeQuietly(wakeRead);
    closeQuietly(wakeWrite);
  }
}
