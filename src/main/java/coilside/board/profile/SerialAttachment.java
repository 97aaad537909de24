package coilside.board.profile;

import java.util.List;
import java.util.Optional;

/**
 * How the board is found and opened on a serial port.
 *
 * @param usbIds "vendor:product" in four lower-case hexadecimal digits each; may be empty
 * @param path pattern of the port's name with * and ?, such as "ttyACM*"
 * @param speedBaud line speed, baud
 * @param dataTerminalReady level of DTR at open
 * @param requestToSend level of RTS at open
 */
public record SerialAttachment(
    List<String> usbIds,
    Optional<String> path,
    int speedBaud,
    boolean dataTerminalReady,
    boolean requestToSend) {
  public SerialAttachment {
    usbIds = List.copyOf(usbIds);
  }
}
