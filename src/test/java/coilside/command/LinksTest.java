package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;

import coilside.board.link.SerialSettings;
import coilside.board.link.SerialSettings.LineState;
import org.junit.jupiter.api.Test;

/** What a profile says of its serial port is what the port is opened with. */
class LinksTest {
  @Test
  void speedAndLinesAreThoseOfTheProfile() {
    SerialSettings plain = Links.settings(Profiles.read("plain-line-console"));
    assertEquals(921_600, plain.baud());
    assertEquals(LineState.OFF, plain.dtr());
    assertEquals(LineState.OFF, plain.rts());
    SerialSettings radio = Links.settings(Profiles.read("radio-frame"));
    assertEquals(2_000_000, radio.baud());
    assertEquals(LineState.ON, radio.dtr());
    assertEquals(LineState.ON, radio.rts());
  }
}
