package coilside.board.link;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.link.LinkException.Kind;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Instant;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;

@Timeout(value = 30, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class ReopeningTest {
  @TempDir Path folder;

  private PortLocks locks() {
    return new PortLocks(folder, "a test", () -> Instant.EPOCH);
  }

  private Ports ports(PortInfo... present) {
    return new Ports(locks(), () -> List.of(present), folder);
  }

  private static PortInfo usb(String path, String serialNumber) {
    return new PortInfo(path, "console", 0x1209, 0xc512, serialNumber, "");
  }

  @Test
  void thePausesGrowAndNothingIsTriedInBetween() {
    long[] now = {0};
    List<Long> tries = new ArrayList<>();
    Reopening reopening =
        new Reopening(
            () -> {
              tries.add(now[0] / 1_000_000);
              throw new LinkException(Kind.MISSING, "not there");
            },
            () -> now[0]);
    while (now[0] < 20_000_000_000L) {
      assertEquals(Kind.MISSING, assertThrows(LinkException.class, reopening::open).kind());
      assertTrue(reopening.waitNanos() > 0);
      now[0] += 10_000_000;
    }
    assertEquals(List.of(0L, 50L, 150L, 350L, 750L, 1550L, 3150L, 6350L, 11350L, 16350L), tries);
  }

  @Test
  void aUsbBoardIsFoundAgainUnderANewName() throws Exception {
    PortIdentity identity =
        PortIdentity.of(
            "/dev/ttyNONE0", ports(usb("/dev/ttyNONE0", "17"), usb("/dev/ttyNONE1", "18")));
    assertEquals(new PortIdentity("/dev/ttyNONE0", 0x1209, 0xc512, "17"), identity);
    assertEquals(
        "/dev/ttyNONE3",
        identity.find(ports(usb("/dev/ttyNONE0", "18"), usb("/dev/ttyNONE3", "17"))));
    assertEquals(
        Kind.MISSING,
        assertThrows(LinkException.class, () -> identity.find(ports(usb("/dev/ttyNONE0", "18"))))
            .kind());
  }

  @Test
  void ofSeveralWithoutSerialNumberOnlyTheOldPathWillDo() throws Exception {
    PortIdentity identity = new PortIdentity("/dev/ttyNONE0", 0x1209, 0xc512, "");
    assertEquals(
        "/dev/ttyNONE0", identity.find(ports(usb("/dev/ttyNONE0", ""), usb("/dev/ttyNONE1", ""))));
    assertEquals("/dev/ttyNONE1", identity.find(ports(usb("/dev/ttyNONE1", ""))));
    LinkException e =
        assertThrows(
            LinkException.class,
            () -> identity.find(ports(usb("/dev/ttyNONE1", ""), usb("/dev/ttyNONE2", ""))));
    assertTrue(e.getMessage().contains("not the only one"), e.getMessage());
  }

  @Test
  @EnabledOnOs(value = OS.LINUX, disabledReason = "pseudo-terminals are made on Linux only")
  void aPortThatWentAwayIsOpenedAgainBehindItsStablePath() throws Exception {
    Path stable = folder.resolve("board");
    long[] now = {0};
    PortIdentity identity = new PortIdentity(stable.toString(), -1, -1, "");
    Reopening reopening =
        new Reopening(
            Reopening.serial(identity, SerialSettings.at(115_200), locks(), ports()), () -> now[0]);
    for (int k = 0; k < 3; k++) {
      assertEquals(Kind.MISSING, assertThrows(LinkException.class, reopening::open).kind());
      now[0] += reopening.waitNanos();
      PseudoTerminal board = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.DROP);
      Files.createSymbolicLink(stable, board.path());
      try (Link link = reopening.open()) {
        link.send(LinkContract.bytes("who"));
        assertEquals("who", new String(LinkContract.receiveAll(board, 3)));
        board.close();
        Files.delete(stable);
        assertEquals(
            Kind.LOST,
            assertThrows(LinkException.class, () -> link.receive(new byte[1], LinkContract.LONG))
                .kind());
      }
    }
  }
}
