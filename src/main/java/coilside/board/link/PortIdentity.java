package coilside.board.link;

import coilside.board.link.LinkException.Kind;
import java.io.IOException;
import java.nio.file.Path;
import java.util.List;

/**
 * What tells one serial port from another when it comes back under a new name: its USB numbers
 * where it has them, else the path it was opened by.
 *
 * @param path as given when it was first opened; may be a link that stays put
 * @param usbVendor USB vendor number; -1 where it is no USB port
 * @param usbProduct USB product number; -1 where it is no USB port
 * @param serialNumber may be empty
 */
public record PortIdentity(String path, int usbVendor, int usbProduct, String serialNumber) {
  /** The identity of a port that is present now. */
  public static PortIdentity of(String path, Ports ports) throws LinkException {
    String device = device(path);
    for (PortInfo port : ports.list()) {
      if (device(port.path()).equals(device)) {
        return new PortIdentity(path, port.usbVendor(), port.usbProduct(), port.serialNumber());
      }
    }
    return new PortIdentity(path, -1, -1, "");
  }

  private static String device(String path) {
    try {
      return Path.of(path).toRealPath().toString();
    } catch (IOException | RuntimeException e) {
      return path;
    }
  }

  /**
   * Where it is attached now. With several of the same kind and no serial number only the one on
   * the old path will do.
   *
   * @throws LinkException MISSING while it is not attached
   */
  public String find(Ports ports) throws LinkException {
    if (usbVendor < 0) {
      return path;
    }
    List<PortInfo> alike =
        ports.list().stream()
            .filter(p -> p.usbVendor() == usbVendor && p.usbProduct() == usbProduct)
            .filter(p -> p.serialNumber().equals(serialNumber))
            .toList();
    String device = device(path);
    for (PortInfo port : alike) {
      if (device(port.path()).equals(device)) {
        return path;
      }
    }
    if (alike.size() == 1) {
      return alike.get(0).path();
    }
    throw new LinkException(
        Kind.MISSING,
        path
            + ": the board (USB "
            + String.format("%04x:%04x", usbVendor, usbProduct)
            + (serialNumber.isEmpty() ? "" : ", serial number " + serialNumber)
            + ") is "
            + (alike.isEmpty() ? "not attached" : "not the only one of its kind")
            + "; plug it in again where it was");
  }
}
