package coilside.board.link;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Instant;
import java.util.List;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** What blocks a port, with a listing, a process folder and permissions of our own making. */
class PortsTest {
  @TempDir Path folder;
  private Path first;
  private Path second;
  private Path proc;
  private PortLocks locks;

  @BeforeEach
  void twoPorts() throws Exception {
    first = Files.createFile(folder.resolve("ttyACM0")).toRealPath();
    second = Files.createFile(folder.resolve("ttyUSB0")).toRealPath();
    proc = Files.createDirectory(folder.resolve("proc"));
    locks = new PortLocks(folder.resolve("locks"), "a test", () -> Instant.EPOCH);
  }

  private Ports ports(boolean mayOpen) {
    return new Ports(
        locks,
        () ->
            List.of(
                new PortInfo(second.toString(), "USB serial", 0x1A86, 0x7523, "", ""),
                new PortInfo(first.toString(), "Console", 0x1209, 0xc511, "0042", "")),
        proc,
        device -> mayOpen || device.equals(second));
  }

  @Test
  void sortedByPathAndFree() throws Exception {
    List<PortInfo> found = ports(true).list();
    assertEquals(
        List.of(first.toString(), second.toString()), found.stream().map(PortInfo::path).toList());
    assertEquals("1209:c511", found.get(0).usbId());
    assertEquals("1a86:7523", found.get(1).usbId());
    assertEquals("", found.get(0).blocked());
  }

  @Test
  void heldByOneOfOurOwnItNamesTheHolder() throws Exception {
    try (PortLocks.Held held = locks.take(first)) {
      String blocked = ports(true).list().get(0).blocked();
      assertTrue(blocked.startsWith("in use by 'a test' (process "), blocked + held);
      assertTrue(blocked.contains("since 1970-01-01T00:00:00Z"), blocked);
    }
    assertEquals("", ports(true).list().get(0).blocked());
  }

  @Test
  void openInAStrangersProgramItNamesThatProgram() throws Exception {
    Path process = Files.createDirectories(proc.resolve("4711").resolve("fd"));
    Files.createSymbolicLink(process.resolve("5"), second);
    Files.writeString(proc.resolve("4711").resolve("comm"), "modem\u001bwatcher\n");
    List<PortInfo> found = ports(true).list();
    assertEquals("", found.get(0).blocked());
    assertEquals("in use by modemwatcher (process 4711)", found.get(1).blocked());
  }

  @Test
  void withoutPermissionItNamesTheGroupAndWhatToDo() throws Exception {
    List<PortInfo> found = ports(false).list();
    String group = Files.readAttributes(first, "posix:group").get("group").toString();
    String blocked = found.get(0).blocked();
    assertTrue(blocked.startsWith("you may not open it (it belongs to user "), blocked);
    assertTrue(blocked.contains("group " + group), blocked);
    assertTrue(blocked.contains("usermod -aG dialout"), blocked);
    assertFalse(found.get(1).blocked().contains("may not"), found.get(1).blocked());
  }

  @Test
  void aDeviceIsFoundWhereverItIsPluggedIn() throws Exception {
    assertEquals(first.toString(), ports(true).find(0x1209, 0xc511, "").orElseThrow().path());
    assertTrue(ports(true).find(0x1209, 0xc511, "0043").isEmpty());
  }
}
