package coilside.command;

import coilside.board.BoardException;
import coilside.board.link.HostPort;
import coilside.board.link.Link;
import coilside.board.link.LinkException;
import coilside.board.link.NativeFolder;
import coilside.board.link.PortIdentity;
import coilside.board.link.PortInfo;
import coilside.board.link.PortLocks;
import coilside.board.link.Ports;
import coilside.board.link.Reopening;
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
  private static final int USUAL_BAUD = 115_200;

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

  /**
   * How a lost line to the same board is opened again. A serial port with USB numbers is found by
   * them, whatever name it comes back under; any other by its address. Asked while it is open.
   */
  static Reopening.Opener again(BoardAddress address, DeviceProfile profile) {
    Optional<PortIdentity> identity = serialIdentity(address);
    return () -> {
      if (identity.isPresent()) {
        return serial(identity.get().find(new Ports(locks())), profile);
      }
      try {
        return open(address, profile);
      } catch (BoardException e) {
        throw new LinkException(LinkException.Kind.MISSING, e.getMessage(), e);
      }
    };
  }

  private static Optional<PortIdentity> serialIdentity(BoardAddress address) {
    boolean network = !address.port().startsWith("/") && address.port().contains(":");
    if (address.port().isEmpty() || network) {
      return Optional.empty();
    }
    try {
      return Optional.of(PortIdentity.of(address.port(), new Ports(locks())));
    } catch (LinkException e) {
      return Optional.empty();
    }
  }

  private static Link byProfile(DeviceProfile profile) throws LinkException, BoardException {
    if (profile.serial().isEmpty() && profile.tcp().isPresent()) {
      return TcpLink.open(profile.tcp().get().host(), profile.tcp().get().port(), locks());
    }
    prepareNatives();
    List<PortInfo> ports = new Ports(locks()).list();
    return serial(choose(profile, ports).path(), profile);
  }

  /**
   * The one port that the profile means: by USB id, else by its path pattern.
   *
   * @throws BoardException none fits, or several do
   */
  static PortInfo choose(DeviceProfile profile, List<PortInfo> ports) throws BoardException {
    List<Profiles.Known> only = List.of(new Profiles.Known(profile.name(), profile));
    List<PortInfo> sure =
        ports.stream().filter(p -> Fit.of(p, only).stream().anyMatch(Fit::sure)).toList();
    List<PortInfo> fitting =
        sure.isEmpty() ? ports.stream().filter(p -> !Fit.of(p, only).isEmpty()).toList() : sure;
    if (fitting.size() == 1) {
      return fitting.get(0);
    }
    String wanted =
        profile
            .serial()
            .map(
                a ->
                    "USB ids "
                        + (a.usbIds().isEmpty() ? "none" : String.join(", ", a.usbIds()))
                        + ", path "
                        + a.path().orElse("none"))
            .orElse("no [serial] section");
    throw new BoardException.Unreachable(
        (fitting.isEmpty()
                ? "no port shows a device that the profile '" + profile.name() + "' names ("
                : fitting.size()
                    + " ports ("
                    + String.join(", ", fitting.stream().map(PortInfo::path).toList())
                    + ") fit the profile '"
                    + profile.name()
                    + "' (")
            + wanted
            + "): 'coilside ports' lists what is attached; give the port as --board PROFILE@PORT");
  }

  private static Link serial(String path, DeviceProfile profile) throws LinkException {
    prepareNatives();
    return SerialLink.open(path, settings(profile), locks());
  }

  /** How the profile wants its port opened; the time to settle is waited by the driver. */
  static SerialSettings settings(DeviceProfile profile) {
    if (profile.serial().isEmpty()) {
      return SerialSettings.at(USUAL_BAUD);
    }
    SerialAttachment a = profile.serial().get();
    return SerialSettings.at(a.speedBaud())
        .withLines(
            a.dataTerminalReady() ? LineState.ON : LineState.OFF,
            a.requestToSend() ? LineState.ON : LineState.OFF);
  }
}
