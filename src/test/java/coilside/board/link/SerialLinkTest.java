package coilside.board.link;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.link.LinkException.Kind;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.time.Instant;
import java.util.Set;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;

/** The serial link over a pseudo-terminal. */
@EnabledOnOs(value = OS.LINUX, disabledReason = "pseudo-terminals are made on Linux only")
class SerialLinkTest extends LinkContract {
  @TempDir Path folder;
  private PseudoTerminalLine deaf;

  PortLocks locks() {
    return new PortLocks(folder, "a test", () -> Instant.EPOCH);
  }

  SerialLink serial(Path path) throws LinkException {
    return SerialLink.open(path.toString(), SerialSettings.at(115_200), locks());
  }

  @Override
  Ends connect() throws Exception {
    PseudoTerminal far = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.STALL);
    return new Ends(serial(far.path()), far);
  }

  @Override
  Link connectToNobody(Duration writeLimit) throws Exception {
    deaf = PseudoTerminalLine.open();
    return SerialLink.open(
        deaf.path().toString(), SerialSettings.at(115_200).withWriteLimit(writeLimit), locks());
  }

  @AfterEach
  void closeDeaf() {
    if (deaf != null) {
      deaf.release();
    }
  }

  @Test
  void aMissingPortSaysWhatToDo() {
    LinkException e = assertThrows(LinkException.class, () -> serial(folder.resolve("ttyNone0")));
    assertEquals(Kind.MISSING, e.kind());
    assertTrue(e.getMessage().contains("coilside ports"), e.getMessage());
  }

  @Test
  void aFileIsNoPort() throws Exception {
    Path file = Files.writeString(folder.resolve("file"), "x");
    assertEquals(Kind.UNUSABLE, assertThrows(LinkException.class, () -> serial(file)).kind());
    assertEquals(Kind.UNUSABLE, assertThrows(LinkException.class, () -> serial(folder)).kind());
    LinkException e = assertThrows(LinkException.class, () -> serial(Path.of("/dev/null")));
    assertEquals(Kind.UNUSABLE, e.kind());
    assertTrue(e.getMessage().contains("no serial port"), e.getMessage());
  }

  @Test
  void aPortHeldByThisProgramIsRefusedByName() throws Exception {
    try (PseudoTerminal board = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.STALL);
        SerialLink first = serial(board.path())) {
      LinkException e = assertThrows(LinkException.class, () -> serial(board.path()));
      assertEquals(Kind.BUSY, e.kind());
      assertTrue(
          e.getMessage().contains("'a test' (process " + ProcessHandle.current().pid()),
          e.getMessage());
      first.send(bytes("?"));
    }
    try (PseudoTerminal board = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.STALL)) {
      serial(board.path()).close();
      serial(board.path()).close();
    }
  }

  @Test
  void aPortHeldBehindOurBackIsRefused() throws Exception {
    try (PseudoTerminal board = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.STALL);
        SerialLink first = serial(board.path())) {
      PortLocks elsewhere =
          new PortLocks(folder.resolve("other"), "another test", () -> Instant.EPOCH);
      LinkException e =
          assertThrows(
              LinkException.class,
              () -> SerialLink.open(board.path().toString(), SerialSettings.at(9600), elsewhere));
      assertEquals(Kind.BUSY, e.kind());
      assertTrue(first.description().contains("115200 baud"), first.description());
    }
  }

  @Test
  void ourOwnTerminalIsRefused() throws Exception {
    try (PseudoTerminal board = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.STALL)) {
      long number = OwnTerminal.deviceNumber(board.path());
      assertTrue(number > 0);
      LinkException e =
          assertThrows(
              LinkException.class,
              () ->
                  SerialLink.open(
                      board.path().toString(), SerialSettings.at(9600), locks(), Set.of(number)));
      assertEquals(Kind.UNUSABLE, e.kind());
      assertTrue(e.getMessage().contains("terminal this program runs in"), e.getMessage());
    }
  }

  @Test
  void aLinkToThePortIsFollowedAndNamesTheSameLock() throws Exception {
    try (PseudoTerminal board = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.STALL)) {
      Path stable = Files.createSymbolicLink(folder.resolve("board"), board.path());
      try (SerialLink first = serial(stable)) {
        first.send(bytes("?"));
        assertEquals('?', receiveAll(board, 1)[0]);
        assertEquals(
            Kind.BUSY, assertThrows(LinkException.class, () -> serial(board.path())).kind());
      }
    }
  }

  @Test
  void linesAndFrameOptionsAreTaken() throws Exception {
    SerialSettings settings =
        SerialSettings.at(9600)
            .withLines(SerialSettings.LineState.OFF, SerialSettings.LineState.OFF)
            .withFrame(8, SerialSettings.Parity.NONE, 2);
    try (PseudoTerminal board = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.STALL);
        SerialLink link = SerialLink.open(board.path().toString(), settings, locks())) {
      link.send(bytes("?"));
      assertEquals('?', receiveAll(board, 1)[0]);
    }
  }

  @Test
  void theNativeLibraryLiesInAPrivateFolder() throws Exception {
    serial(connectPath()).close();
    Path library = Path.of(System.getProperty("jSerialComm.library.path"));
    assertTrue(library.startsWith(NativeFolder.folder()), library.toString());
    assertEquals(
        "rwx------",
        java.nio.file.attribute.PosixFilePermissions.toString(
            Files.getPosixFilePermissions(NativeFolder.folder())));
  }

  private Path connectPath() throws LinkException {
    deaf = PseudoTerminalLine.open();
    return deaf.path();
  }
}
