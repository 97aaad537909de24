package coilside.board.simulated;

/**
 * What the firmware answers when it cannot do as told. Codes are those of SCPI-1999, as positive
 * numbers where a board's own pattern knows no sign.
 */
final class FirmwareRefusal extends Exception {
  private static final long serialVersionUID = 1L;

  private final int code;

  private FirmwareRefusal(int code, String text) {
    super(text, null, false, false);
    this.code = code;
  }

  int code() {
    return code;
  }

  static FirmwareRefusal syntax(String detail) {
    return new FirmwareRefusal(-102, "Syntax error;" + detail);
  }

  static FirmwareRefusal undefined(String detail) {
    return new FirmwareRefusal(-113, "Undefined header;" + detail);
  }

  static FirmwareRefusal number(String detail) {
    return new FirmwareRefusal(-120, "Numeric data error;" + detail);
  }

  static FirmwareRefusal conflict(String detail) {
    return new FirmwareRefusal(-221, "Settings conflict;" + detail);
  }

  static FirmwareRefusal range(String detail) {
    return new FirmwareRefusal(-222, "Data out of range;" + detail);
  }

  static FirmwareRefusal queueOverflow() {
    return new FirmwareRefusal(-350, "Queue overflow");
  }

  static FirmwareRefusal tooMuch(String detail) {
    return new FirmwareRefusal(-223, "Too much data;" + detail);
  }
}
