package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;

import com.google.gson.JsonParser;
import java.net.InetAddress;
import java.net.ServerSocket;
import java.nio.file.Files;
import java.nio.file.LinkOption;
import java.nio.file.Path;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

@Timeout(value = 120, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class SimulateCommandTest {
  @TempDir Path folder;

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "simulate --profile no-such | no-such",
        "simulate --scenario no-such | no-such",
        "simulate --listen 127.0.0.1 | --listen",
        "simulate --listen :99999 | 99999",
        "simulate --listen :0 --link x | --link is for a pseudo-terminal",
        "simulate --seed many | --seed",
        "check no-such | no-such",
        "check | PROFILE",
        "check scpi-console --board x | takes the board as its argument",
        "check scpi-console@ | PROFILE[@PORT]"
      })
  void wrongArgumentsAreWrongUsage(String arguments, String word) {
    CommandRun run = CommandRun.of(arguments.split(" "));
    assertEquals(2, run.status(), run.out() + run.err());
    assertTrue(run.err().contains(word.strip()), run.err());
    assertEquals("", run.out());
  }

  @Test
  void aNetworkPortInUseIsOutOfReach() throws Exception {
    try (ServerSocket taken = new ServerSocket(0, 1, InetAddress.getLoopbackAddress())) {
      CommandRun run = CommandRun.of("simulate", "--listen", ":" + taken.getLocalPort());
      assertEquals(3, run.status(), run.err());
      assertTrue(run.err().contains("127.0.0.1:" + taken.getLocalPort()), run.err());
    }
  }

  @Test
  @EnabledOnOs(value = OS.LINUX, disabledReason = "pseudo-terminals are made on Linux only")
  void itSaysWhereItIsAndTakesItsLinkAway() throws Exception {
    Path link = folder.resolve("board");
    try (Program board = Program.start(folder, "simulate", "--json", "--link", link.toString())) {
      var said = JsonParser.parseString(board.firstLine()).getAsJsonObject();
      assertEquals(link.toString(), said.get("address").getAsString());
      assertEquals("scpi-console", said.get("profile").getAsString());
      assertTrue(Files.readSymbolicLink(link).toString().startsWith("/dev/pts/"));
      CommandRun check = CommandRun.of("check", "scpi-console@" + link);
      assertEquals(0, check.status(), check.out() + check.err());
      board.terminate();
      assertEquals(0, board.ended().status());
      assertFalse(Files.exists(link, LinkOption.NOFOLLOW_LINKS));
    }
  }

  @Test
  void aFileInTheWayOfTheLinkIsNotTakenAway() throws Exception {
    Path file = Files.writeString(folder.resolve("board"), "mine");
    CommandRun run = CommandRun.of("simulate", "--link", file.toString());
    assertEquals(2, run.status(), run.err());
    assertTrue(run.err().contains("give a path that is free"), run.err());
    assertEquals("mine", Files.readString(file));
  }
}
