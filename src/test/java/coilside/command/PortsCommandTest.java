package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertThrows;
import static org.junit.jupiter.api.Assertions.assertTrue;

import coilside.board.BoardException;
import coilside.board.link.PortInfo;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** Which profile fits which port and why, with ports that are not there. */
class PortsCommandTest {
  private static final PortInfo CONSOLE =
      new PortInfo("/dev/ttyACM0", "Console", 0x1209, 0xc511, "0042", "");
  private static final PortInfo STRANGE =
      new PortInfo("/dev/ttyACM1", "Modem", 0x1d50, 0x6018, "", "in use by modem (process 7)");
  private static final PortInfo PLAIN = new PortInfo("/dev/ttyUSB3", "", -1, -1, "", "");

  @TempDir Path folder;

  private static String lines(List<PortInfo> ports, List<Profiles.Known> known) {
    StringWriter out = new StringWriter();
    PortsCommand.lines(ports, known, new Output(new PrintWriter(out), new PrintWriter(out), false));
    return out.toString();
  }

  private Path ownProfile(String from, String to) throws Exception {
    String text = Files.readString(Path.of("device-profiles", "pulse-and-receive.toml"));
    return Files.writeString(folder.resolve("magnet-box.toml"), text.replace(from, to));
  }

  @Test
  void aUsbIdIsSureAndAPathIsNot() {
    List<Profiles.Known> known = Profiles.known(folder);
    assertEquals(
        List.of(new Fit("scpi-console", true, "USB id 1209:c511")), Fit.of(CONSOLE, known));
    assertEquals(List.of(), Fit.of(STRANGE, known));
    List<Fit> maybe = Fit.of(PLAIN, known);
    assertEquals(
        List.of("plain-line-console", "pulse-and-receive"),
        maybe.stream().map(Fit::profile).toList());
    assertTrue(maybe.stream().noneMatch(Fit::sure));
    assertEquals("its path pattern 'ttyUSB*'", maybe.get(0).why());
  }

  @Test
  void theListSaysWhyAndWhatBlocks() {
    String text = lines(List.of(CONSOLE, STRANGE, PLAIN), Profiles.known(folder));
    assertTrue(
        text.contains(
            "/dev/ttyACM0     1209:c511  Console 0042\n"
                + "    fits scpi-console by USB id 1209:c511\n"
                + "    free\n"),
        text);
    assertTrue(text.contains("    no profile names this device"), text);
    assertTrue(text.contains("    blocked: in use by modem (process 7)\n"), text);
    assertTrue(text.contains("coilside check pulse-and-receive@/dev/ttyUSB3"), text);
    assertTrue(lines(List.of(), List.of()).contains("no serial ports"));
  }

  @Test
  void ownProfilesAreLookedAtToo() throws Exception {
    Path own = ownProfile("path = \"ttyUSB*\"", "usb = [\"1d50:6018\"]");
    List<Fit> fits = Fit.of(STRANGE, Profiles.known(folder));
    assertEquals(List.of(new Fit(own.toString(), true, "USB id 1d50:6018")), fits);
    Path broken = Files.writeString(folder.resolve("broken.toml"), "name = 3\n");
    assertEquals(List.of(new Fit(own.toString(), true, "USB id 1d50:6018")), fits);
    List<String> unsound = Profiles.unsound(folder);
    assertEquals(1, unsound.size());
    assertTrue(unsound.get(0).startsWith(broken + " is not sound ("), unsound.get(0));
    assertTrue(unsound.get(0).endsWith("coilside check " + broken), unsound.get(0));
  }

  @Test
  void theShippedOnesInTheirFolderAreNotListedTwice() {
    assertEquals(5, Profiles.known(Path.of("device-profiles")).size());
  }

  @Test
  void asADocument() {
    String json = PortsCommand.json(List.of(CONSOLE, STRANGE), Profiles.known(folder)).text();
    assertTrue(json.contains("\"why\": \"USB id 1209:c511\""), json);
    assertTrue(json.contains("\"blocked\": \"in use by modem (process 7)\""), json);
  }

  @Test
  void withoutAPortTheOneThatFitsIsTaken() throws Exception {
    List<PortInfo> ports = List.of(CONSOLE, STRANGE, PLAIN);
    assertEquals(CONSOLE, Links.choose(Profiles.read("scpi-console"), ports));
    assertEquals(PLAIN, Links.choose(Profiles.read("pulse-and-receive"), ports));
    BoardException none =
        assertThrows(BoardException.class, () -> Links.choose(Profiles.read("radio-frame"), ports));
    assertTrue(none.getMessage().contains("1209:c513"), none.getMessage());
    PortInfo twin = new PortInfo("/dev/ttyACM5", "Console", 0x1209, 0xc511, "0043", "");
    BoardException two =
        assertThrows(
            BoardException.class,
            () -> Links.choose(Profiles.read("scpi-console"), List.of(CONSOLE, twin)));
    assertTrue(two.getMessage().contains("2 ports (/dev/ttyACM0, /dev/ttyACM5)"), two.getMessage());
  }

  @Test
  void aFolderThatIsNotThereIsWrongUsage() {
    CommandRun run = CommandRun.of("ports", "--profiles", folder.resolve("nowhere").toString());
    assertEquals(2, run.status());
    assertTrue(run.err().contains("nowhere"), run.err());
  }

  @Test
  void forRealItEndsWellWhateverIsAttached() {
    CommandRun run = CommandRun.of("ports", "--json");
    assertEquals(0, run.status(), run.err());
    assertTrue(run.out().contains("\"ports\""), run.out());
    assertFalse(run.out().contains("/dev/pts/"), run.out());
  }
}
