package coilside.command;

import coilside.board.link.PortInfo;
import coilside.record.JsonDocument;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Locale;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;

/** {@code coilside ports}: the ports present, which profile fits and why, what blocks access. */
@Command(
    name = "ports",
    description = {
      "List serial ports, the profiles that fit each and why, and what blocks access.",
      "Nothing is opened. A board on the network is not found this way."
    },
    mixinStandardHelpOptions = true)
final class PortsCommand implements CoilsideCommand {
  private static final Path USUAL_FOLDER = Path.of("device-profiles");

  @Option(
      names = "--profiles",
      paramLabel = "DIR",
      description = "where your own profiles are (default: ./device-profiles)")
  Path profiles;

  @Option(names = "--json", description = "print one JSON document and nothing else")
  boolean json;

  @Override
  public int run(Output output) throws Exception {
    if (profiles != null && !Files.isDirectory(profiles)) {
      throw new UsageException("--profiles " + profiles + ": there is no such folder");
    }
    Path folder = profiles == null ? USUAL_FOLDER : profiles;
    List<PortInfo> ports = Links.ports();
    List<Profiles.Known> known = Profiles.known(folder);
    if (json) {
      output.line(json(ports, known).text());
      return ExitStatus.DONE;
    }
    lines(ports, known, output);
    Profiles.unsound(folder).forEach(output::aside);
    return ExitStatus.DONE;
  }

  static JsonDocument json(List<PortInfo> ports, List<Profiles.Known> known) {
    return new JsonDocument()
        .putAll("ports", ports.stream().map(port -> json(port, known)).toList());
  }

  private static JsonDocument json(PortInfo port, List<Profiles.Known> known) {
    return new JsonDocument()
        .put("path", port.path())
        .put("description", port.description())
        .put("usb", port.usbId())
        .put("serial_number", port.serialNumber())
        .put("blocked", port.blocked())
        .putAll(
            "profiles",
            Fit.of(port, known).stream()
                .map(
                    fit ->
                        new JsonDocument()
                            .put("profile", fit.profile())
                            .put("sure", fit.sure())
                            .put("why", fit.why()))
                .toList());
  }

  static void lines(List<PortInfo> ports, List<Profiles.Known> known, Output output) {
    if (ports.isEmpty()) {
      output.line(
          "no serial ports: look at cable and power, and at the end of dmesg after plugging in;"
              + " a board on the network is given as --board PROFILE@HOST:PORT");
    }
    for (PortInfo port : ports) {
      output.line(
          String.format(
                  Locale.ROOT,
                  "%-16s %-10s %s %s",
                  port.path(),
                  port.usbId(),
                  port.description(),
                  port.serialNumber())
              .stripTrailing());
      List<Fit> fits = Fit.of(port, known);
      for (Fit fit : fits) {
        output.line(
            (fit.sure() ? "    fits " : "    may fit ")
                + fit.profile()
                + " by "
                + fit.why()
                + (fit.sure() ? "" : ": coilside check " + fit.profile() + "@" + port.path()));
      }
      if (fits.isEmpty()) {
        output.line(
            "    no profile names this device: device-profiles/README.md says how to write one");
      }
      output.line("    " + (port.blocked().isEmpty() ? "free" : "blocked: " + port.blocked()));
    }
  }
}
