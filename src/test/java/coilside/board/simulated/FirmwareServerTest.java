package coilside.board.simulated;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.BoardException;
import coilside.board.driver.Boards;
import coilside.board.link.Link;
import coilside.board.link.LinkException;
import coilside.board.link.MemoryLink;
import coilside.board.link.PortLocks;
import coilside.board.link.SerialLink;
import coilside.board.link.SerialSettings;
import coilside.board.link.TcpLink;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.time.Clock;
import java.time.Instant;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;

/** Serving: programs come, go, hang up in the middle, and the board is there for the next one. */
@Timeout(value = 60, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class FirmwareServerTest {
  private static final String IDENTITY = "Coilside Examples,SC-20,0,1.4\n";

  @TempDir Path folder;

  private static Firmware firmware() {
    return new Firmware(
        FirmwareExchangeTest.profile("scpi-console"),
        new FirmwareAdc(
            FirmwareExchangeTest.profile("scpi-console"), new ToneBench(1e-3, 8.09e6, 20)),
        false,
        FirmwareFaults.none());
  }

  private static void send(Link link, String text) throws LinkException {
    link.send(text.getBytes(StandardCharsets.ISO_8859_1));
  }

  private static String receive(Link link, int length) throws LinkException {
    StringBuilder out = new StringBuilder();
    byte[] some = new byte[length];
    while (out.length() < length) {
      int n = link.receive(some, TimeUnit.SECONDS.toNanos(20));
      assertTrue(n > 0, "nothing came after '" + out + "'");
      out.append(new String(some, 0, n, StandardCharsets.ISO_8859_1));
    }
    return out.toString();
  }

  private static void end(FirmwareServer server) {
    server.close();
  }

  private static String ask(Link link) throws LinkException {
    send(link, "*IDN?\n");
    return receive(link, IDENTITY.length());
  }

  private static void startEndlessRun(Link link) throws LinkException {
    send(link, ":SHOT:CLEAR\n:SHOT:RECEIVE 65536,0.0000010,0.0\n:SHOT:END\n:SHOT:RUN 9,0.0\n");
  }

  @Test
  void onTcpOneProgramAfterTheOther() throws Exception {
    try (FirmwareServer server =
        FirmwareServer.onTcp(firmware(), "127.0.0.1", 0, System::nanoTime)) {
      int port = Integer.parseInt(server.address().replace("127.0.0.1:", ""));
      for (int k = 0; k < 3; k++) {
        try (Link link = TcpLink.open("127.0.0.1", port)) {
          assertEquals(IDENTITY, ask(link));
          startEndlessRun(link);
          send(link, ":SHOT:DATA? 0\n");
        }
      }
      try (Link link = TcpLink.open("127.0.0.1", port)) {
        assertEquals(IDENTITY, ask(link), "what the last one left is gone");
        end(server);
        assertEquals(
            LinkException.Kind.LOST,
            assertThrows(LinkException.class, () -> receive(link, 1)).kind());
      }
    }
  }

  @Test
  void onTcpASecondProgramIsToldWhoIsThereAndTurnedAway() throws Exception {
    try (FirmwareServer server =
        FirmwareServer.onTcp(firmware(), "127.0.0.1", 0, System::nanoTime)) {
      int port = Integer.parseInt(server.address().replace("127.0.0.1:", ""));
      try (Link first = TcpLink.open("127.0.0.1", port)) {
        assertEquals(IDENTITY, ask(first));
        Link second = TcpLink.open("127.0.0.1", port);
        BoardException refused =
            assertThrows(
                BoardException.LinkLost.class,
                () ->
                    Boards.open(
                        FirmwareExchangeTest.profile("scpi-console"),
                        second,
                        System::nanoTime,
                        Clock.systemUTC(),
                        false));
        assertTrue(refused.getMessage().contains("busy: in use by 127.0.0.1:"), refused.toString());
        assertEquals(IDENTITY, ask(first), "the first one is not disturbed");
      }
      try (Link third = TcpLink.open("127.0.0.1", port)) {
        assertEquals(IDENTITY, ask(third), "the place is free again");
      }
    }
  }

  @Test
  @EnabledOnOs(value = OS.LINUX, disabledReason = "pseudo-terminals are made on Linux only")
  void onAPseudoTerminalOneProgramAfterTheOther() throws Exception {
    PortLocks locks = new PortLocks(folder, "a test", () -> Instant.EPOCH);
    try (FirmwareServer server = FirmwareServer.onPseudoTerminal(firmware(), System::nanoTime)) {
      for (int k = 0; k < 3; k++) {
        try (Link link = SerialLink.open(server.address(), SerialSettings.at(9600), locks)) {
          assertEquals(IDENTITY, ask(link));
        }
      }
      try (Link link = SerialLink.open(server.address(), SerialSettings.at(9600), locks)) {
        end(server);
        assertEquals(
            LinkException.Kind.LOST,
            assertThrows(LinkException.class, () -> receive(link, 1)).kind());
      }
    }
  }

  @Test
  void inThisProgramItEndsWithItsLink() throws Exception {
    MemoryLink.Pair pair = MemoryLink.pair("in this process");
    FirmwareServer server = FirmwareServer.over(pair.far(), firmware(), System::nanoTime);
    assertEquals(IDENTITY, ask(pair.near()));
    pair.near().close();
    server.join();
    server.close();
    server.close();
  }

  @Test
  void itListensBetweenAnswersSoThatARunCanBeStopped() throws Exception {
    MemoryLink.Pair pair = MemoryLink.pair("in this process");
    Firmware firmware =
        new Firmware(
            FirmwareExchangeTest.profile("plain-line-console"),
            new FirmwareAdc(
                FirmwareExchangeTest.profile("plain-line-console"), new ToneBench(1, 8e6, 20)),
            false,
            FirmwareFaults.none());
    try (FirmwareServer server = FirmwareServer.over(pair.far(), firmware, System::nanoTime);
        Link link = pair.near()) {
      send(link, "new\npulse 10.0 0 50.0\nlisten 16 10.0\nend\ngo 1000000 1.0000\n");
      receive(link, 2000);
      send(link, "halt\n");
      byte[] some = new byte[1 << 16];
      String last = "";
      // Whatever was under way comes first; after the confirmation there is silence.
      for (int n = 1; n > 0; n = link.receive(some, TimeUnit.MILLISECONDS.toNanos(50))) {
        last = new String(some, 0, n, StandardCharsets.ISO_8859_1);
      }
      assertTrue(last.endsWith("ok\r\n"), server.address());
    }
  }
}
