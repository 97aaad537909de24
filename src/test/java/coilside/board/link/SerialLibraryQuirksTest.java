package coilside.board.link;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.link.LinkException.Kind;
import com.fazecast.jSerialComm.SerialPort;
import com.fazecast.jSerialComm.SerialPortInvalidPortException;
import java.io.BufferedReader;
import java.io.InputStreamReader;
import java.nio.file.Path;
import java.time.Instant;
import java.util.Arrays;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.TimeoutException;
import org.junit.jupiter.api.AfterEach;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;

/**
 * What the serial link relies on in jSerialComm 2.11.4, found out by trying. When one of these
 * fails after an upgrade, the serial link has to be looked at again.
 */
@EnabledOnOs(value = OS.LINUX, disabledReason = "pseudo-terminals are made on Linux only")
@Timeout(value = 30, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class SerialLibraryQuirksTest {
  @TempDir static Path folder;
  private PseudoTerminalLine board;
  private SerialPort port;

  /** Opens a port in a process of its own and holds it until its input ends. */
  public static final class Holder {
    private Holder() {}

    public static void main(String[] args) throws Exception {
      PortLocks elsewhere = new PortLocks(Path.of(args[1]), "another", () -> Instant.EPOCH);
      try (SerialLink link = SerialLink.open(args[0], SerialSettings.at(9600), elsewhere)) {
        System.out.println("held " + link.description().isEmpty());
        System.in.read();
      }
    }
  }

  private static PortLocks locks() {
    return new PortLocks(folder, "a test", () -> Instant.EPOCH);
  }

  @BeforeEach
  void open() throws Exception {
    board = PseudoTerminalLine.open();
    // Opening a link first loads the native library from the private folder.
    SerialLink.open(board.path().toString(), SerialSettings.at(9600), locks()).close();
    port = SerialPort.getCommPort(board.path().toString());
    port.setComPortTimeouts(SerialPort.TIMEOUT_READ_SEMI_BLOCKING, 100, 0);
    assertTrue(port.openPort(0));
  }

  @AfterEach
  void close() {
    board.release();
    port.closePort();
  }

  @Test
  void whenTheOtherEndIsGoneReadsGiveMinusOneAndWritesZeroAndThePortSaysItIsOpen() {
    board.release();
    assertEquals(-1, port.readBytes(new byte[8], 8));
    assertEquals(0, port.writeBytes(new byte[8], 8));
    assertTrue(port.isOpen());
  }

  @Test
  void nothingToReadGivesZeroAfterAWhile() {
    assertEquals(0, port.readBytes(new byte[8], 8));
  }

  @Test
  void anyPartOfWhatIsWantedEndsARead() throws Exception {
    byte[] three = {1, 2, 3};
    assertEquals(3, board.write(three, 0, 3, 1000));
    assertEquals(3, port.readBytes(new byte[64], 64));
  }

  @Test
  void closingFreesABlockedWrite() throws Exception {
    CompletableFuture<Integer> blocked =
        CompletableFuture.supplyAsync(() -> port.writeBytes(new byte[1 << 20], 1 << 20));
    assertThrows(TimeoutException.class, () -> blocked.get(50, TimeUnit.MILLISECONDS));
    port.closePort();
    assertTrue(blocked.get(20, TimeUnit.SECONDS) < 1 << 20);
  }

  @Test
  void aMissingPathIsAnExceptionAndNoDeviceIsNumber25() {
    assertThrows(
        SerialPortInvalidPortException.class,
        () -> SerialPort.getCommPort(folder.resolve("none").toString()));
    SerialPort none = SerialPort.getCommPort("/dev/null");
    assertFalse(none.openPort(0));
    assertEquals(25, none.getLastErrorCode());
  }

  @Test
  void aPortOpenInThisProgramIsRefusedWithTheMisleadingNumber2() {
    SerialPort second = SerialPort.getCommPort(board.path().toString());
    assertFalse(second.openPort(0));
    assertEquals(2, second.getLastErrorCode());
  }

  @Test
  void theLibraryListsWhatItOnceOpenedAndWeDoNot() throws Exception {
    String path = board.path().toString();
    assertTrue(
        Arrays.stream(SerialPort.getCommPorts()).anyMatch(p -> p.getSystemPortPath().equals(path)));
    assertTrue(new Ports(locks()).list().stream().noneMatch(p -> p.path().equals(path)));
  }

  @Test
  void aPortOpenInAnotherProgramIsRefusedWithNumber11AndThatProgramIsNamed() throws Exception {
    port.closePort();
    Process other =
        new ProcessBuilder(
                Path.of(System.getProperty("java.home"), "bin", "java").toString(),
                "-XX:TieredStopAtLevel=1",
                "-cp",
                System.getProperty("java.class.path"),
                Holder.class.getName(),
                board.path().toString(),
                folder.resolve("other").toString())
            .redirectError(ProcessBuilder.Redirect.DISCARD)
            .start();
    try (BufferedReader says = new BufferedReader(new InputStreamReader(other.getInputStream()))) {
      assertEquals("held false", says.readLine());
      SerialPort second = SerialPort.getCommPort(board.path().toString());
      assertFalse(second.openPort(0));
      assertEquals(11, second.getLastErrorCode());
      LinkException e =
          assertThrows(
              LinkException.class,
              () -> SerialLink.open(board.path().toString(), SerialSettings.at(9600), locks()));
      assertEquals(Kind.BUSY, e.kind());
      assertTrue(e.getMessage().contains("java (process " + other.pid() + ")"), e.getMessage());
    } finally {
      other.destroyForcibly();
      other.waitFor();
    }
  }
}
