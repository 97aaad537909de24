package coilside.board.link;

import static org.junit.jupiter.api.Assertions.assertArrayEquals;
import static org.junit.jupiter.api.Assertions.assertEquals;

import java.nio.file.Path;
import java.time.Duration;
import java.time.Instant;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;

/** The board's side of a pseudo-terminal, with the serial link as its other end. */
@EnabledOnOs(value = OS.LINUX, disabledReason = "pseudo-terminals are made on Linux only")
class PseudoTerminalTest extends LinkContract {
  @TempDir Path folder;

  private SerialLink serial(PseudoTerminal board) throws LinkException {
    return SerialLink.open(
        board.path().toString(),
        SerialSettings.at(115_200),
        new PortLocks(folder, "a test", () -> Instant.EPOCH));
  }

  @Override
  Ends connect() throws Exception {
    PseudoTerminal near = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.STALL);
    return new Ends(near, serial(near));
  }

  @Override
  Link connectToNobody(Duration writeLimit) throws Exception {
    return PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.STALL, writeLimit);
  }

  @Override
  boolean noticesHangUp() {
    return false;
  }

  @Test
  void itSurvivesProgramsComingAndGoing() throws Exception {
    try (PseudoTerminal board = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.DROP)) {
      for (int i = 0; i < 3; i++) {
        try (SerialLink client = serial(board)) {
          client.send(bytes("hello"));
          assertArrayEquals(bytes("hello"), receiveAll(board, 5));
          board.send(bytes("there"));
          assertArrayEquals(bytes("there"), receiveAll(client, 5));
        }
      }
    }
  }

  @Test
  void whatNobodyReadsIsDroppedWhenSoWanted() throws Exception {
    try (PseudoTerminal board = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.DROP)) {
      board.send(new byte[1 << 20]);
      try (SerialLink client = serial(board)) {
        client.send(bytes("?"));
        receiveAll(board, 1);
        while (client.receive(new byte[4096], 0) > 0) {
          // What was still under way.
        }
        board.send(bytes("there"));
        assertArrayEquals(bytes("there"), receiveAll(client, 5));
      }
    }
  }

  @Test
  void pathsAreThoseOfTheSystem() throws Exception {
    try (PseudoTerminal board = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.DROP)) {
      assertEquals(Path.of("/dev/pts"), board.path().getParent());
    }
  }
}
