package coilside.board.simulated;

import coilside.board.profile.Expectation;
import coilside.board.profile.Template;
import coilside.board.profile.WireValue;
import java.util.Map;
import java.util.Optional;

/**
 * How the board cuts and understands what it hears, and says what it has to say. Messages are
 * strings with one character a byte.
 */
interface FirmwareDialect {
  /** Takes bytes from the line. */
  void hear(byte[] bytes, int offset, int length);

  /** The next whole message, without line end, checksum and stuffing; empty when none is whole. */
  Optional<String> nextMessage() throws FirmwareRefusal;

  /** Forgets a message heard in part. */
  void forget();

  /** A message with all that belongs around it on the wire. */
  byte[] wrap(String message);

  /**
   * The values of a template's slots when the message is one of it; empty when it is something
   * else.
   *
   * @param values how each named value travels; a plain number where it is not there
   * @return by slot name, in SI
   * @throws FirmwareRefusal the message is of this template but a value cannot be read
   */
  Optional<Map<String, Double>> understand(
      Template template, String message, Map<String, WireValue> values) throws FirmwareRefusal;

  /**
   * What the board says where this is expected.
   *
   * @param said by slot name: a number or a text
   */
  String say(Expectation expectation, Map<String, Object> said);

  /** A number on the wire turned to SI. */
  static double inSi(WireValue value, double onWire) throws FirmwareRefusal {
    if (value.step() > 0) {
      double steps = onWire / value.step();
      if (Math.abs(steps - Math.rint(steps)) > 1e-6 * Math.max(1, Math.abs(steps))) {
        throw FirmwareRefusal.number(
            value.name().word() + " " + onWire + " is no multiple of " + value.step());
      }
    }
    return (onWire - value.offset()) / value.scale() * value.unitInSi();
  }
}
