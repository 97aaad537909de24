package coilside.board.link;

import java.time.Duration;
import java.util.Objects;

/**
 * How a serial port is set when it is opened. Time to settle is not among it: whoever talks to the
 * board waits, since a greeting may end the wait early.
 *
 * @param baud speed, baud; boards on native USB take any
 * @param dataBits 5..8
 * @param stopBits 1 or 2
 * @param parity parity bit
 * @param flow who may hold back whom
 * @param dtr the DTR line at open; many boards restart when it changes
 * @param rts the RTS line at open
 * @param writeLimit longest time a write may take
 */
public record SerialSettings(
    int baud,
    int dataBits,
    int stopBits,
    Parity parity,
    Flow flow,
    LineState dtr,
    LineState rts,
    Duration writeLimit) {

  /** The parity bit. */
  public enum Parity {
    NONE,
    EVEN,
    ODD
  }

  /** Flow control. There is no XON/XOFF: sample blocks may hold any byte. */
  public enum Flow {
    NONE,
    RTS_CTS
  }

  /** What a modem line is set to at open. */
  public enum LineState {
    ON,
    OFF
  }

  public SerialSettings {
    if (baud < 1) {
      throw new IllegalArgumentException("speed " + baud + " baud must be above 0 baud");
    }
    if (dataBits < 5 || dataBits > 8) {
      throw new IllegalArgumentException(dataBits + " data bits: must be 5..8");
    }
    if (stopBits < 1 || stopBits > 2) {
      throw new IllegalArgumentException(stopBits + " stop bits: must be 1 or 2");
    }
    Objects.requireNonNull(parity, "parity");
    Objects.requireNonNull(flow, "flow");
    Objects.requireNonNull(dtr, "dtr");
    Objects.requireNonNull(rts, "rts");
    if (writeLimit.isNegative() || writeLimit.isZero()) {
      throw new IllegalArgumentException("write limit " + writeLimit + " must be above 0 s");
    }
  }

  /** 8 data bits, 1 stop bit, no parity, no flow control, DTR and RTS on. */
  public static SerialSettings at(int baud) {
    return new SerialSettings(
        baud, 8, 1, Parity.NONE, Flow.NONE, LineState.ON, LineState.ON, QueuedLink.WRITE_LIMIT);
  }

  public SerialSettings withLines(LineState dtrAtOpen, LineState rtsAtOpen) {
    return new SerialSettings(
        baud, dataBits, stopBits, parity, flow, dtrAtOpen, rtsAtOpen, writeLimit);
  }

  public SerialSettings withWriteLimit(Duration limit) {
    return new SerialSettings(baud, dataBits, stopBits, parity, flow, dtr, rts, limit);
  }

  public SerialSettings withFrame(int bits, Parity parityBit, int stops) {
    return new SerialSettings(baud, bits, stops, parityBit, flow, dtr, rts, writeLimit);
  }

  public SerialSettings withFlow(Flow control) {
    return new SerialSettings(baud, dataBits, stopBits, parity, control, dtr, rts, writeLimit);
  }
}
