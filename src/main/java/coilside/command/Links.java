package coilside.command;

import coilside.board.BoardException;
import coilside.board.link.HostPort;
import coilside.board.link.Link;
import coilside.board.link.LinkException;
import coilside.board.link.NativeFolder;
import coilside.board.link.PortInfo;
import coilside.board.link.PortLocks;
import coilside.board.link.Ports;
import coilside.board.link.SerialLink;
import coilside.board.link.SerialSettings;
import coilside.board.link.SerialSettings.LineState;
import coilside.board.link.TcpLink;
import coilside.board.profile.DeviceProfile;
import coilside.board.profile.SerialAttachment;
import java.nio.file.Path;
import java.time.InstantSource;
import java.util.List;
import java.util.Optional;

/** Opens the line to a board where the address and its profile say it is. */
final class Links {
  private Links() {}

  /** The user's own folder for what must not be shared: unpacked native libraries. */
  static Path privateFolder() {
    String cache = System.getenv().getOrDefault("XDG_CACHE_HOME", "");
    Path base =
        cache.startsWith("/") ? Path.of(cache) : Path.of(System.getProperty("user.home"), ".cache");
    return base.resolve("coilside");
  }

  static PortLocks locks() {
    return new PortLocks(
        PortLocks.usualFolder(System.getenv(), Path.of(System.getProperty("user.home"))),
        "coilside",
        InstantSource.system());
  }

  static void prepareNatives() {
    NativeFolder.use(privateFolder().resolve("native"));
  }

  static List<PortInfo> ports() throws BoardException {
    prepareNatives();
    try {
      return new Ports(locks()).list();
    } catch (LinkException e) {
      throw new BoardException.Unreachable(e.getMessage(), e);
    }
  }

  /** Opens the line; the address is not that of the simulated bench. */
  static Link open(BoardAddress address, DeviceProfile profile) throws BoardException {
    try {
      if (address.port().isEmpty()) {
        return byProfile(profile);
      }
      if (!address.port().startsWith("/") && address.port().contains(":")) {
        HostPort to = HostPort.parse(address.port());
        return TcpLink.open(to.host(), to.port(), locks());
      }
      return serial(address.port(), profile);
    } catch (LinkException e) {
      throw new BoardException.Unreachable(e.getMessage(), e);
    } catch (IllegalArgumentException e) {
      throw new UsageException("--board: " + e.getMessage());
    }
  }

  private static Link byProfile(DeviceProfile profile) throws LinkException, BoardException {
    Optional<SerialAttachment> attachment = profile.serial();
    if (attachment.isPresent() && !attachment.get().usbIds().isEmpty()) {
      prepareNatives();
      for (PortInfo port : new Ports(locks()).list()) {
        if (attachment.get().usbIds().contains(port.usbId())) {
          return serial(port.path(), profile);
        }
      }
    }
    if (attachment.isEmpty() && profile.tcp().isPresent()) {
      return TcpLink.open(profile.tcp().get().host(), profile.tcp().get().port(), locks());
    }
    throw new BoardException.Unreachable(
        "no port shows a device that the profile '"
            + profile.name()
            + "' names ("
            + attachment.map(a -> String.join(", ", a.usbIds())).orElse("no USB ids")
            + "): 'coilside ports' lists what is attached; give the port as --board PROFILE@PORT");
  }

  private static Link serial(String path, DeviceProfile profile) throws LinkException {
    prepareNatives();
    SerialSettings settings = SerialSettings.at(115200);
    if (profile.serial().isPresent()) {
      SerialAttachment a = profile.serial().get();
      settings =
          SerialSettings.at(a.speedBaud())
              .withLines(
                  a.dataTerminalReady() ? LineState.ON : LineState.OFF,
                  a.requestToSend() ? LineState.ON : LineState.OFF);
    }
    return SerialLink.open(path, settings, locks());
  }
}
