package coilside.command;

import coilside.board.link.PortInfo;
import coilside.record.Json;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
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
      List<Map<String, Object>> rows = new ArrayList<>();
      for (PortInfo port : ports) {
        Map<String, Object> row = new LinkedHashMap<>();
        row.put("path", port.path());
        row.put("description", port.description());
        row.put("usb", port.usbId());
        row.put("serial_number", port.serialNumber());
        row.put("blocked", port.blocked());
        row.put("profiles", Profiles.fitting(port));
        rows.add(row);
      }
      output.line(Json.document(Map.of("ports", rows)));
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
