package coilside.board.link;

/**
 * A serial port that is present.
 *
 * @param path what to open: "/dev/ttyACM0"
 * @param description what the device calls itself; may be empty
 * @param usbVendor USB vendor number; -1 where it is no USB port
 * @param usbProduct USB product number; -1 where it is no USB port
 * @param serialNumber the device's serial number; may be empty
 * @param blocked what keeps us from opening it, with what to do; empty when nothing does
 */
public record PortInfo(
    String path,
    String description,
    int usbVendor,
    int usbProduct,
    String serialNumber,
    String blocked) {

  /** "1d50:6018", lower-case hex as USB numbers are written; empty where it is no USB port. */
  public String usbId() {
    return usbVendor < 0 || usbProduct < 0
        ? ""
        : String.format("%04x:%04x", usbVendor & 0xffff, usbProduct & 0xffff);
  }

  PortInfo blockedBy(String what) {
    return new PortInfo(path, description, usbVendor, usbProduct, serialNumber, what);
  }
}
