package coilside.board.link;

import coilside.board.link.LinkException.Kind;
import com.fazecast.jSerialComm.SerialPort;
import com.fazecast.jSerialComm.SerialPortInvalidPortException;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Set;

/**
 * A link over a serial port, through jSerialComm; the only class that knows that library. Opened by
 * an explicit path, held exclusively, read by one thread.
 *
 * <p>A lost port is not opened again by itself: see {@link Reopening}.
 */
public final class SerialLink extends QueuedLink {
  private static final int READ_SLICE_MILLISECONDS = 100;
  private static final int ERRNO_MISSING = 2;
  private static final int ERRNO_BUSY_LOCK = 11;
  private static final int ERRNO_FORBIDDEN = 13;
  private static final int ERRNO_BUSY_DEVICE = 16;
  private static final int ERRNO_NO_DEVICE = 19;
  private static final int ERRNO_IS_FOLDER = 21;
  private static final int ERRNO_NO_TERMINAL = 25;
  private static final int ERRNO_GONE = 6;

  private static boolean libraryReady;

  private final SerialPort port;
  private final PortLocks.Held held;

  private SerialLink(
      SerialPort port, PortLocks.Held held, String description, SerialSettings settings) {
    super(description, settings.writeLimit(), QUEUE_BYTES);
    this.port = port;
    this.held = held;
  }

  /**
   * Opens a port.
   *
   * @param path the device, links are followed: "/dev/ttyACM0", "/dev/serial/by-id/..."
   * @param settings speed, frame, lines
   * @param locks where to say that we hold it
   * @throws LinkException missing, busy, forbidden, unusable: each with what to do
   */
  public static SerialLink open(String path, SerialSettings settings, PortLocks locks)
      throws LinkException {
    return open(path, settings, locks, OwnTerminal.devices(Path.of("/proc")));
  }

  static SerialLink open(
      String path, SerialSettings settings, PortLocks locks, Set<Long> ownTerminals)
      throws LinkException {
    Path device = resolve(path);
    if (ownTerminals.contains(OwnTerminal.deviceNumber(device))) {
      throw new LinkException(
          Kind.UNUSABLE,
          path + " is the terminal this program runs in; give the path of the board's own port");
    }
    prepareLibrary();
    PortLocks.Held held = locks.take(device);
    SerialLink link = null;
    try {
      link = openHeld(path, device, settings, held);
    } finally {
      if (link == null) {
        held.close();
      }
    }
    link.start();
    return link;
  }

  private static Path resolve(String path) throws LinkException {
    if (windows()) {
      return Path.of(path.replaceAll("[\\\\.]", ""));
    }
    try {
      Path device = Path.of(path).toRealPath();
      if (Files.isRegularFile(device) || Files.isDirectory(device)) {
        throw new LinkException(
            Kind.UNUSABLE,
            path
                + " is a "
                + (Files.isDirectory(device) ? "folder" : "file")
                + ", no serial port; `coilside ports` lists the ports present");
      }
      return device;
    } catch (LinkException e) {
      throw e;
    } catch (IOException | RuntimeException e) {
      throw missing(path, e);
    }
  }

  private static boolean windows() {
    return System.getProperty("os.name", "").toLowerCase(Locale.ROOT).contains("win");
  }

  private static LinkException missing(String path, Exception cause) {
    return new LinkException(
        Kind.MISSING,
        path
            + ": there is no such port; plug the board in and check the path:"
            + " `coilside ports` lists the ports present",
        cause);
  }

  private static SerialLink openHeld(
      String path, Path device, SerialSettings settings, PortLocks.Held held) throws LinkException {
    try {
      SerialPort port = SerialPort.getCommPort(windows() ? path : device.toString());
      configure(port, settings);
      if (!port.openPort(0)) {
        throw refusal(path, device, port.getLastErrorCode());
      }
      port.flushIOBuffers();
      return new SerialLink(
          port, held, device.getFileName() + " at " + settings.baud() + " baud", settings);
    } catch (SerialPortInvalidPortException e) {
      throw missing(path, e);
    } catch (LinkageError e) {
      throw noLibrary(e);
    }
  }

  private static void configure(SerialPort port, SerialSettings s) {
    port.setComPortParameters(
        s.baud(),
        s.dataBits(),
        s.stopBits() == 1 ? SerialPort.ONE_STOP_BIT : SerialPort.TWO_STOP_BITS,
        switch (s.parity()) {
          case NONE -> SerialPort.NO_PARITY;
          case EVEN -> SerialPort.EVEN_PARITY;
          case ODD -> SerialPort.ODD_PARITY;
        });
    port.setFlowControl(
        s.flow() == SerialSettings.Flow.NONE
            ? SerialPort.FLOW_CONTROL_DISABLED
            : SerialPort.FLOW_CONTROL_RTS_ENABLED | SerialPort.FLOW_CONTROL_CTS_ENABLED);
    // Before the port is open these choose how it is opened.
    if (s.dtr() == SerialSettings.LineState.ON) {
      port.setDTR();
    } else {
      port.clearDTR();
    }
    if (s.rts() == SerialSettings.LineState.ON) {
      port.setRTS();
    } else {
      port.clearRTS();
    }
    port.setComPortTimeouts(SerialPort.TIMEOUT_READ_SEMI_BLOCKING, READ_SLICE_MILLISECONDS, 0);
  }

  private static LinkException refusal(String path, Path device, int errno) {
    return switch (errno) {
      case ERRNO_FORBIDDEN ->
          new LinkException(
              Kind.FORBIDDEN,
              path + ": you may not open it (" + owner(device) + "). " + joinGroup());
      case ERRNO_BUSY_LOCK, ERRNO_BUSY_DEVICE, ERRNO_MISSING ->
          new LinkException(
              Kind.BUSY,
              path
                  + " is in use by "
                  + users(device)
                  + "; end that program first, or choose another port");
      case ERRNO_NO_TERMINAL, ERRNO_IS_FOLDER ->
          new LinkException(
              Kind.UNUSABLE, path + " is no serial port; `coilside ports` lists the ports present");
      case ERRNO_NO_DEVICE, ERRNO_GONE -> missing(path, null);
      default ->
          new LinkException(
              Kind.UNUSABLE,
              path
                  + " cannot be opened (system error "
                  + errno
                  + "); unplug the board, plug it in again and try once more");
    };
  }

  private static String users(Path device) {
    List<String> users = DeviceUse.holders(Path.of("/proc"), device, ProcessHandle.current().pid());
    return users.isEmpty() ? "another program" : String.join(", ", users);
  }

  static String owner(Path device) {
    try {
      Map<String, Object> found = Files.readAttributes(device, "posix:owner,group,permissions");
      return "it belongs to user " + found.get("owner") + " and group " + found.get("group");
    } catch (IOException | RuntimeException e) {
      return "no permission";
    }
  }

  /** How to be let in, for messages and listings. */
  static String joinGroup() {
    return "Join the group that owns serial ports (dialout on Debian, uucp on some others) with"
        + " `sudo usermod -aG dialout $USER`, then log out and in again";
  }

  /** Unpacks and loads the native library from our private folder, once. */
  private static synchronized void prepareLibrary() throws LinkException {
    if (libraryReady) {
      return;
    }
    Path folder = NativeFolder.ensure(NativeFolder.folder());
    Throwable why = null;
    for (String resource :
        SerialNatives.resources(
            System.getProperty("os.name", ""), System.getProperty("os.arch", ""))) {
      try {
        // Loading it ourselves first keeps the library from unpacking a copy where others may
        // write.
        Path file = NativeFolder.unpack(SerialPort.class, resource, folder);
        System.load(file.toString());
        System.setProperty("jSerialComm.library.path", file.getParent().toString());
        libraryReady = true;
        return;
      } catch (IOException | LinkageError e) {
        why = e;
      }
    }
    throw noLibrary(why);
  }

  private static LinkException noLibrary(Throwable why) {
    return new LinkException(
        Kind.UNUSABLE,
        "the serial library cannot be used on this computer ("
            + (why == null
                ? "no build for " + System.getProperty("os.arch") + " processors"
                : String.valueOf(why.getMessage()).replaceAll("\\p{Cntrl}", " "))
            + "); it was unpacked into "
            + NativeFolder.folder()
            + ": if programs may not be run from there, set XDG_CACHE_HOME to a folder where they"
            + " may; boards on TCP (HOST:PORT) work without it",
        why);
  }

  /** What the library lists as present, raw. */
  static List<PortInfo> listed() throws LinkException {
    prepareLibrary();
    try {
      List<PortInfo> found = new ArrayList<>();
      for (SerialPort port : SerialPort.getCommPorts()) {
        // The library also lists whatever was opened by its path in this program.
        if (port.getSystemPortPath().startsWith("/dev/pts/")) {
          continue;
        }
        found.add(
            new PortInfo(
                port.getSystemPortPath(),
                clean(port.getPortDescription()),
                port.getVendorID(),
                port.getProductID(),
                clean(port.getSerialNumber()),
                ""));
      }
      return found;
    } catch (LinkageError e) {
      throw noLibrary(e);
    }
  }

  private static String clean(String text) {
    if (text == null || text.equals("Unknown")) {
      return "";
    }
    String clean = text.replaceAll("[\\p{Cntrl}\\p{Cf}]", "").trim();
    return clean.length() > 120 ? clean.substring(0, 120) : clean;
  }

  @Override
  int readLine(byte[] into) {
    return port.readBytes(into, into.length);
  }

  @Override
  int writeLine(byte[] from, int offset, int length) {
    return port.writeBytes(from, length, offset);
  }

  @Override
  void releaseLine() {
    port.closePort();
    held.close();
  }
}
