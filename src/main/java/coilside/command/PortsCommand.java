package coilside.command;

import coilside.board.link.PortInfo;
import coilside.record.JsonDocument;
import java.util.List;
import java.util.Locale;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;

/** {@code coilside ports}: the ports present, and which profile fits. */
@Command(
    name = "ports",
    description = "List serial ports, the profile that fits each, and what blocks access.",
    mixinStandardHelpOptions = true)
final class PortsCommand implements CoilsideCommand {
  @Mixin CommonOptions common;

  @Override
  public int run(Output output) throws Exception {
    List<PortInfo> ports = Links.ports();
    if (common.json) {
      List<JsonDocument> rows =
          ports.stream()
              .map(
                  port ->
                      new JsonDocument()
                          .put("path", port.path())
                          .put("description", port.description())
                          .put("usb", port.usbId())
                          .put("serial_number", port.serialNumber())
                          .put("blocked", port.blocked())
                          .putTexts("profiles", Profiles.fitting(port)))
              .toList();
      output.line(new JsonDocument().putAll("ports", rows).text());
      return ExitStatus.DONE;
    }
    if (ports.isEmpty()) {
      output.line(
          "no serial ports: look at cable and power, and at the end of dmesg after plugging in;"
              + " a board on the network is given as --board PROFILE@HOST:PORT");
    }
    for (PortInfo port : ports) {
      output.line(
          String.format(
              Locale.ROOT, "%-16s %-10s %s", port.path(), port.usbId(), port.description()));
      List<String> fitting = Profiles.fitting(port);
      output.line(
          "    "
              + (fitting.isEmpty()
                  ? "no shipped profile names this device"
                  : "fits: " + String.join(", ", fitting)));
      if (!port.blocked().isEmpty()) {
        output.line("    blocked: " + port.blocked());
      }
    }
    return ExitStatus.DONE;
  }
}
