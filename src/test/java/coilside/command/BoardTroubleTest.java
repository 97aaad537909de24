package coilside.command;

import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertFalse;
import static org.junit.jupiter.api.Assertions.assertTrue;
import static org.junit.jupiter.api.Assumptions.assumeTrue;

import coilside.board.link.Link;
import coilside.board.link.PseudoTerminal;
import coilside.board.link.SerialLink;
import coilside.board.link.SerialSettings;
import coilside.board.link.TcpListener;
import java.io.File;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.attribute.PosixFilePermissions;
import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.Timeout;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;

/** Boards that cannot be reached or are not what they should be: exit 3, and what to do. */
@EnabledOnOs(value = OS.LINUX, disabledReason = "pseudo-terminals are made on Linux only")
@Timeout(value = 120, threadMode = Timeout.ThreadMode.SEPARATE_THREAD)
class BoardTroubleTest {
  @TempDir Path folder;

  private static void assertRefused(CommandRun run, int status, String... words) {
    assertEquals(status, run.status(), run.out() + run.err());
    for (String word : words) {
      assertTrue(run.err().contains(word), "'" + word + "' is not in: " + run.err());
    }
    assertFalse(run.err().contains("\tat "), "a stack trace: " + run.err());
    assertFalse(run.err().contains("Exception"), "an exception's name: " + run.err());
  }

  private String[] ready(String address) {
    return new String[] {
      "ready", "--board", address, "--captures", folder.resolve("captures").toString()
    };
  }

  /** A shipped profile whose board is given up soon. */
  private String hasty(String name) throws Exception {
    String text = Files.readString(Path.of("device-profiles", name + ".toml"));
    Path file = folder.resolve(name + ".toml");
    Files.writeString(file, text.replaceFirst("time_limit = \".*\"", "time_limit = \"100ms\""));
    return file.toString();
  }

  @Test
  void aPortHeldByAnotherProcessNamesIt() throws Exception {
    try (PseudoTerminal board = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.DROP);
        Link held =
            SerialLink.open(board.path().toString(), SerialSettings.at(9600), Links.locks());
        Program ready = Program.start(folder, ready("scpi-console@" + board.path()))) {
      CommandRun run = ready.ended();
      assertRefused(
          run, 3, board.path().toString(), "in use by", "process " + ProcessHandle.current().pid());
      assertTrue(held.description().contains("9600"), held.description());
    }
  }

  @Test
  @Tag("machine")
  void aPortThatOneMayNotOpenNamesOwnerAndGroup() throws Exception {
    assumeTrue(
        System.getProperty("user.name").equals("root") && new File("/usr/bin/setpriv").canExecute(),
        "needs root and setpriv, to run as somebody else");
    Path open = Files.createTempDirectory(Path.of("/var/tmp"), "somebody");
    Files.setPosixFilePermissions(open, PosixFilePermissions.fromString("rwxrwxrwx"));
    try (PseudoTerminal board = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.DROP)) {
      StringBuilder path = new StringBuilder();
      for (String part : System.getProperty("java.class.path").split(File.pathSeparator)) {
        copy(Path.of(part), open);
      }
      for (String part :
          System.getProperty("surefire.test.class.path", System.getProperty("java.class.path"))
              .split(File.pathSeparator)) {
        path.append(copy(Path.of(part), open)).append(File.pathSeparator);
      }
      List<String> command = new ArrayList<>();
      command.addAll(List.of("/usr/bin/setpriv", "--reuid=65534", "--clear-groups", "--"));
      command.add(Path.of(System.getProperty("java.home"), "bin", "java").toString());
      command.addAll(List.of("-Duser.home=" + open, "-cp", path.toString(), "coilside.Main"));
      command.addAll(
          List.of(
              "ready",
              "--board",
              "scpi-console@" + board.path(),
              "--captures",
              open.resolve("captures").toString()));
      try (Program ready = Program.run(open, new File("/dev/null"), command)) {
        CommandRun run = ready.ended();
        assertRefused(
            run, 3, board.path() + ": you may not open it (it belongs to user root", "dialout");
      }
    } finally {
      delete(open);
    }
  }

  private static Path copy(Path from, Path folder) throws Exception {
    Path to = folder.resolve(Integer.toHexString(from.hashCode()) + "-" + from.getFileName());
    if (Files.exists(to) || !Files.exists(from)) {
      return to;
    }
    try (var files = Files.walk(from)) {
      for (Path file : files.toList()) {
        Files.copy(file, to.resolve(from.relativize(file).toString()));
      }
    }
    return to;
  }

  private static void delete(Path folder) throws Exception {
    try (var files = Files.walk(folder)) {
      for (Path file : files.sorted(java.util.Comparator.reverseOrder()).toList()) {
        Files.delete(file);
      }
    }
  }

  @Test
  void aBoardThatNeverAnswersIsGivenUpInTime() throws Exception {
    try (PseudoTerminal board = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.DROP)) {
      String address = hasty("scpi-console") + "@" + board.path();
      long from = System.nanoTime();
      CommandRun run = CommandRun.of(ready(address));
      assertRefused(run, 3, "did not answer '*IDN?' within 0.100 s", "powered");
      // Settling, three tries; the rest is what a loaded computer takes.
      assertTrue(System.nanoTime() - from < TimeUnit.SECONDS.toNanos(10));
      CommandRun check = CommandRun.of("check", address);
      assertEquals(3, check.status(), check.out());
      assertTrue(check.out().contains("bad      identify"), check.out());
    }
  }

  @Test
  void aBoardThatGivesWrongAnswersIsShownWithThem() throws Exception {
    try (TcpListener listener = TcpListener.onLoopback(0)) {
      Thread board =
          new Thread(
              () -> {
                try (Link caller = listener.accept(Duration.ofSeconds(30)).orElseThrow()) {
                  byte[] some = new byte[256];
                  while (caller.receive(some, TimeUnit.SECONDS.toNanos(30)) >= 0) {
                    caller.send("Kettle\u001b[2J 2000\n".getBytes(StandardCharsets.ISO_8859_1));
                  }
                } catch (Exception e) {
                  // The caller has hung up.
                }
              });
      board.setDaemon(true);
      board.start();
      CommandRun run =
          CommandRun.of(ready(hasty("scpi-console") + "@127.0.0.1:" + listener.port()));
      assertRefused(run, 3, "Kettle.[2J 2000", "which is not what the profile");
      board.join();
    }
  }

  @Test
  void theTerminalThatTheProgramRunsInIsNoBoard() throws Exception {
    try (PseudoTerminal terminal = PseudoTerminal.open(PseudoTerminal.WhenNobodyReads.DROP);
        Program ready =
            Program.start(
                folder, terminal.path().toFile(), ready("plain-line-console@" + terminal.path()))) {
      assertRefused(ready.ended(), 3, "is the terminal this program runs in");
    }
  }

  @Test
  void twoProgramsOnOneNetworkBoard() throws Exception {
    try (Program board = Program.start(folder, "simulate", "--listen", "127.0.0.1:0")) {
      String address = board.firstLine();
      String[] at = address.split(":");
      try (Link first = coilside.board.link.TcpLink.open(at[0], Integer.parseInt(at[1]));
          Program second = Program.start(folder, ready("scpi-console@" + address))) {
        first.send("*IDN?\n".getBytes(StandardCharsets.US_ASCII));
        assertRefused(second.ended(), 3, "busy: in use by 127.0.0.1:", "one program at a time");
      }
    }
  }

  @Test
  void aWireLogIsKeptAndNotWrittenOver() throws Exception {
    Path log = folder.resolve("wire.txt");
    CommandRun check =
        CommandRun.of("check", "plain-line-console@simulated", "--wire-log", log.toString());
    assertEquals(0, check.status(), check.out() + check.err());
    String text = Files.readString(log);
    assertTrue(text.startsWith("# exchange with "), text);
    assertTrue(text.contains(" > who\\n\n"), text.substring(0, 400));
    CommandRun again =
        CommandRun.of("check", "plain-line-console@simulated", "--wire-log", log.toString());
    assertRefused(again, 2, log.toString(), "exists already");
    assertEquals(text, Files.readString(log));
    assertRefused(
        CommandRun.of(
            "check", "scpi-console@simulated", "--wire-log", folder + "/nowhere/wire.txt"),
        2,
        "cannot be written");
  }
}
