package coilside.command;

import coilside.board.BoardException;
import coilside.board.link.HostPort;
import coilside.board.link.LinkException;
import coilside.board.profile.DeviceProfile;
import coilside.board.simulated.Firmware;
import coilside.board.simulated.FirmwareServer;
import coilside.record.JsonDocument;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;

/** {@code coilside simulate}: serves a simulated board until it is stopped. */
@Command(
    name = "simulate",
    description = {
      "Serve a simulated board on a new pseudo-terminal, or over TCP.",
      "Prints where it is, and runs until Ctrl-C."
    },
    mixinStandardHelpOptions = true)
final class SimulateCommand implements CoilsideCommand {
  @Option(
      names = "--profile",
      paramLabel = "PROFILE",
      description = "how the board speaks (default: ${DEFAULT-VALUE})",
      defaultValue = BoardAddress.USUAL_PROFILE)
  String profile;

  @Option(
      names = "--scenario",
      paramLabel = "FILE",
      description = "what is on the bench: a scenario file, or a shipped one's name")
  String scenario;

  @Option(
      names = "--listen",
      paramLabel = "HOST:PORT",
      description = "serve over TCP; :PORT means this machine only; port 0 takes any free one")
  String listen;

  @Option(
      names = "--link",
      paramLabel = "PATH",
      description = "make this symbolic link point at the pseudo-terminal")
  Path link;

  @Option(names = "--paced", description = "take the time a real board would")
  boolean paced;

  @Option(
      names = "--seed",
      paramLabel = "N",
      description = "where its chance starts (default: ${DEFAULT-VALUE})",
      defaultValue = "1")
  long seed;

  @Option(names = "--json", description = "print the address as a JSON document")
  boolean json;

  @Override
  public int run(Output output) throws Exception {
    if (listen != null && link != null) {
      throw new UsageException("--link is for a pseudo-terminal: leave out --listen or --link");
    }
    DeviceProfile speaks = Profiles.read(profile);
    Firmware firmware = Simulation.firmware(speaks, scenario, seed, paced);
    try (FirmwareServer server = serve(firmware)) {
      Interrupt interrupt = Interrupt.calls(server::close);
      try (interrupt) {
        String where = link == null ? server.address() : linked(server.address());
        announce(where, output);
        server.join();
      } finally {
        takeLinkAway(server.address());
      }
    }
    return ExitStatus.DONE;
  }

  private void announce(String where, Output output) {
    if (json) {
      output.line(new JsonDocument().put("profile", profile).put("address", where).line());
      return;
    }
    output.line(where);
    output.aside(
        "A simulated board that speaks '"
            + profile
            + "' is at "
            + where
            + ". In another terminal: coilside ready --board "
            + profile
            + "@"
            + where
            + ". Ctrl-C ends it.");
  }

  private FirmwareServer serve(Firmware firmware) throws BoardException {
    try {
      if (listen == null) {
        return FirmwareServer.onPseudoTerminal(firmware, System::nanoTime);
      }
      HostPort at = HostPort.parse(listen.startsWith(":") ? "127.0.0.1" + listen : listen);
      return FirmwareServer.onTcp(firmware, at.host(), at.port(), System::nanoTime);
    } catch (LinkException e) {
      throw new BoardException.Unreachable(e.getMessage(), e);
    } catch (IllegalArgumentException e) {
      throw new UsageException("--listen: " + e.getMessage());
    }
  }

  /** Takes our own link away: not a file that was in its way, nor a link that leads elsewhere. */
  private void takeLinkAway(String address) throws IOException {
    if (link != null
        && Files.isSymbolicLink(link)
        && Files.readSymbolicLink(link).equals(Path.of(address))) {
      Files.delete(link);
    }
  }

  private String linked(String address) {
    try {
      if (Files.isSymbolicLink(link)) {
        Files.delete(link);
      }
      Files.createSymbolicLink(link, Path.of(address));
      return link.toString();
    } catch (IOException e) {
      throw new UsageException(
          "--link " + link + " cannot be made: " + e.getMessage() + "; give a path that is free");
    }
  }
}
