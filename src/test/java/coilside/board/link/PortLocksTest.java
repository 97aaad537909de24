package coilside.board.link;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.link.LinkException.Kind;
import java.io.BufferedReader;
import java.io.InputStreamReader;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Instant;
import java.util.List;
import java.util.Optional;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class PortLocksTest {
  private static final Path DEVICE = Path.of("/dev/ttyNOWHERE7");
  private static final Instant THEN = Instant.parse("2026-03-01T08:00:00Z");

  @TempDir Path folder;

  /** Takes a lock in a process of its own, says so, and holds it until its input ends. */
  public static final class Holder {
    private Holder() {}

    public static void main(String[] args) throws Exception {
      try (PortLocks.Held held =
          new PortLocks(Path.of(args[0]), "night log", () -> THEN).take(DEVICE)) {
        System.out.println("held " + held.getClass().getSimpleName());
        System.in.read();
      }
    }
  }

  private PortLocks locks() {
    return new PortLocks(folder, "a test", () -> THEN);
  }

  @Test
  void anotherProgramIsRefusedByNameAndAKilledHolderLeavesNothingBehind() throws Exception {
    Process other =
        new ProcessBuilder(
                Path.of(System.getProperty("java.home"), "bin", "java").toString(),
                "-XX:TieredStopAtLevel=1",
                "-cp",
                System.getProperty("java.class.path"),
                Holder.class.getName(),
                folder.toString())
            .redirectError(ProcessBuilder.Redirect.DISCARD)
            .start();
    try (BufferedReader says = new BufferedReader(new InputStreamReader(other.getInputStream()))) {
      assertEquals("held Held", says.readLine());
      LinkException e = assertThrows(LinkException.class, () -> locks().take(DEVICE));
      assertEquals(Kind.BUSY, e.kind());
      assertEquals(
          DEVICE
              + " is in use by 'night log' (process "
              + other.pid()
              + ", since 2026-03-01T08:00:00Z); end that program first, or choose another port",
          e.getMessage());
      assertEquals(
          Optional.of(new PortLocks.Holder(other.pid(), "night log", THEN)),
          locks().holder(DEVICE));
    } finally {
      other.destroyForcibly();
      other.waitFor();
    }
    assertEquals(Optional.empty(), locks().holder(DEVICE));
    locks().take(DEVICE).close();
  }

  @Test
  void inThisProgramTheSecondIsRefusedAndTheFirstKeepsIt() throws Exception {
    try (PortLocks.Held held = locks().take(DEVICE)) {
      assertThrows(LinkException.class, () -> locks().take(DEVICE));
      assertThrows(LinkException.class, () -> locks().take(DEVICE));
      assertEquals("a test", locks().holder(DEVICE).orElseThrow().program(), held.toString());
    }
    assertEquals(Optional.empty(), locks().holder(DEVICE));
  }

  @Test
  void aFolderThatCannotBeWrittenIsNamed() throws Exception {
    Path file = Files.writeString(folder.resolve("file"), "");
    LinkException e =
        assertThrows(
            LinkException.class, () -> new PortLocks(file, "a test", () -> THEN).take(DEVICE));
    assertEquals(Kind.FORBIDDEN, e.kind());
    assertTrue(e.getMessage().contains(file.toString()), e.getMessage());
  }

  @Test
  void aForeignLockFileIsReadWithCare() {
    assertEquals(Optional.empty(), PortLocks.parse("pid x\n"));
    assertEquals(Optional.empty(), PortLocks.parse(""));
    assertEquals(
        "[31mred", PortLocks.parse("pid 4\nprogram \u001b[31mred\n").orElseThrow().program());
    assertEquals(
        80, PortLocks.parse("pid 4\nprogram " + "x".repeat(900)).orElseThrow().program().length());
  }

  @Test
  void portsSayWhatBlocksThem() throws Exception {
    Path proc = folder.resolve("proc");
    Path free = Files.writeString(folder.resolve("ttyA"), "");
    Path used = Files.writeString(folder.resolve("ttyB"), "");
    Path ours = Files.writeString(folder.resolve("ttyC"), "");
    Files.createDirectories(proc.resolve("77/fd"));
    Files.writeString(proc.resolve("77/comm"), "modem\u0007daemon\n");
    Files.createSymbolicLink(proc.resolve("77/fd/3"), used.toRealPath());
    List<PortInfo> raw =
        List.of(
            new PortInfo(used.toString(), "console", 0x1209, 0xc512, "17", ""),
            new PortInfo(free.toString(), "", -1, -1, "", ""),
            new PortInfo(ours.toString(), "", 0x1209, 0xc512, "18", ""));
    Ports ports = new Ports(locks(), () -> raw, proc);
    try (PortLocks.Held held = locks().take(ours.toRealPath())) {
      List<PortInfo> seen = ports.list();
      assertEquals("", seen.get(0).blocked(), held.toString());
      assertEquals("", seen.get(0).usbId());
      assertEquals("in use by modemdaemon (process 77)", seen.get(1).blocked());
      assertEquals("1209:c512", seen.get(1).usbId());
      assertTrue(seen.get(2).blocked().startsWith("in use by 'a test'"), seen.get(2).blocked());
    }
    assertEquals(used.toString(), ports.find(0x1209, 0xc512, "").orElseThrow().path());
    assertEquals(ours.toString(), ports.find(0x1209, 0xc512, "18").orElseThrow().path());
    assertEquals(Optional.empty(), ports.find(0x1209, 1, ""));
  }
}
