package coilside.board.link;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import java.io.StringWriter;
import java.nio.file.FileAlreadyExistsException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.time.Instant;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** A link with a wire log behaves as one without. */
class WireLogTest extends LinkContract {
  @TempDir Path folder;

  @Override
  Ends connect() throws Exception {
    MemoryLink.Pair pair = MemoryLink.pair("in this process");
    return new Ends(
        WireLog.over(pair.near(), folder.resolve("log.txt"), () -> Instant.EPOCH, System::nanoTime),
        pair.far());
  }

  @Override
  Link connectToNobody(Duration writeLimit) throws Exception {
    return new WireLog(
        MemoryLink.pair("in this process", 1000, writeLimit).near(),
        new StringWriter(),
        () -> Instant.EPOCH,
        System::nanoTime,
        1 << 20);
  }

  @Test
  void theFileIsWhatAPersonWouldWrite() throws Exception {
    MemoryLink.Pair pair = MemoryLink.pair("in this process");
    long[] now = {5};
    Path file = folder.resolve("exchange.txt");
    try (Link link = WireLog.over(pair.near(), file, () -> Instant.EPOCH, () -> now[0])) {
      link.send(bytes("*IDN?\n"));
      now[0] += 1_500_000;
      pair.far().send(bytes("bench \\ 1\r\n#14\u0000\u00ff\n \n"));
      receiveAll(link, 19);
      now[0] += 2_000_000_000L;
      pair.far().close();
      assertThrows(LinkException.class, () -> link.receive(new byte[1], LONG));
    }
    assertEquals(
        """
        # exchange with in this process
        # started 1970-01-01T00:00:00Z; each line: seconds since then, > to the board or < from it, the bytes
        0.000000 > *IDN?\\n
        0.001500 < bench \\\\ 1\\r\\n
        0.001500 < #14\\x00\\xff\\n \\n
        2.001500 ! lost
        """,
        Files.readString(file));
  }

  @Test
  void anExistingFileIsNotOverwritten() throws Exception {
    Path file = Files.writeString(folder.resolve("kept.txt"), "x");
    assertThrows(
        FileAlreadyExistsException.class,
        () ->
            WireLog.over(
                MemoryLink.pair("in this process").near(),
                file,
                () -> Instant.EPOCH,
                System::nanoTime));
  }

  @Test
  void aFullLogEndsWithoutEndingTheLink() throws Exception {
    MemoryLink.Pair pair = MemoryLink.pair("in this process");
    StringWriter out = new StringWriter();
    WireLog log = new WireLog(pair.near(), out, () -> Instant.EPOCH, () -> 0, 400);
    log.send(new byte[1000]);
    assertTrue(log.trouble().isPresent());
    log.send(bytes("on"));
    assertEquals(1002, receiveAll(pair.far(), 1002).length);
    assertTrue(out.toString().length() < 500, out.toString());
  }
}
