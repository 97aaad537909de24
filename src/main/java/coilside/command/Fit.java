package coilside.command;

import coilside.board.link.PortInfo;
import coilside.board.profile.SerialAttachment;
import java.nio.file.FileSystems;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;

/**
 * A profile that a port may belong to.
 *
 * @param profile its name
 * @param sure true where the USB id says so; a path alone is shared by many kinds of boards
 * @param why in words
 */
record Fit(String profile, boolean sure, String why) {
  /** The profiles that fit a port, the sure ones first. */
  static List<Fit> of(PortInfo port, List<Profiles.Known> profiles) {
    List<Fit> sure = new ArrayList<>();
    List<Fit> maybe = new ArrayList<>();
    for (Profiles.Known known : profiles) {
      if (known.profile().serial().isEmpty()) {
        continue;
      }
      SerialAttachment at = known.profile().serial().get();
      if (!port.usbId().isEmpty() && at.usbIds().contains(port.usbId())) {
        sure.add(new Fit(known.name(), true, "USB id " + port.usbId()));
      } else if (at.usbIds().isEmpty() || port.usbId().isEmpty()) {
        if (matches(port, at)) {
          maybe.add(
              new Fit(known.name(), false, "its path pattern '" + at.path().orElse("") + "'"));
        }
      }
    }
    sure.addAll(maybe);
    return sure;
  }

  /** True where the port's name, or its whole path, is of the profile's pattern. */
  static boolean matches(PortInfo port, SerialAttachment at) {
    if (at.path().isEmpty()) {
      return false;
    }
    String pattern = at.path().get();
    Path path = Path.of(port.path());
    Path compared = pattern.startsWith("/") ? path : path.getFileName();
    String literal = pattern.replaceAll("[\\[\\]{}\\\\]", "\\\\$0");
    return compared != null
        && FileSystems.getDefault().getPathMatcher("glob:" + literal).matches(compared);
  }
}
