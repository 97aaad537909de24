package coilside.board.link;

import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Objects;
import java.util.Optional;
import java.util.function.Predicate;

/**
 * The serial ports that are present, who they are on USB, and what keeps us from opening them.
 * Looked up on demand: nothing is watched. Pseudo-terminals are never listed.
 */
public final class Ports {
  private final PortLocks locks;
  private final Lister lister;
  private final Path proc;
  private final Predicate<Path> access;

  /** Where the raw list comes from. */
  @FunctionalInterface
  interface Lister {
    List<PortInfo> list() throws LinkException;
  }

  public Ports(PortLocks locks) {
    this(locks, SerialLink::listed, Path.of("/proc"));
  }

  Ports(PortLocks locks, Lister lister, Path proc) {
    this(locks, lister, proc, device -> Files.isReadable(device) && Files.isWritable(device));
  }

  Ports(PortLocks locks, Lister lister, Path proc, Predicate<Path> access) {
    this.locks = Objects.requireNonNull(locks, "locks");
    this.lister = lister;
    this.proc = proc;
    this.access = access;
  }

  /**
   * What is present, sorted by path.
   *
   * @throws LinkException the serial library cannot be used here
   */
  public List<PortInfo> list() throws LinkException {
    List<PortInfo> out = new ArrayList<>();
    for (PortInfo port : lister.list()) {
      out.add(port.blockedBy(whatBlocks(Path.of(port.path()))));
    }
    out.sort(Comparator.comparing(PortInfo::path));
    return out;
  }

  /**
   * The port of a USB device, wherever it is plugged in.
   *
   * @param serialNumber empty for any
   */
  public Optional<PortInfo> find(int usbVendor, int usbProduct, String serialNumber)
      throws LinkException {
    return lister.list().stream()
        .filter(p -> p.usbVendor() == usbVendor && p.usbProduct() == usbProduct)
        .filter(p -> serialNumber.isEmpty() || p.serialNumber().equals(serialNumber))
        .min(Comparator.comparing(PortInfo::path));
  }

  private String whatBlocks(Path path) {
    Path device = real(path);
    Optional<PortLocks.Holder> holder = locks.holder(device);
    if (holder.isPresent()) {
      return "in use by " + holder.get();
    }
    if (Files.exists(device) && !access.test(device)) {
      return "you may not open it (" + SerialLink.owner(device) + "). " + SerialLink.joinGroup();
    }
    List<String> users = DeviceUse.holders(proc, device, ProcessHandle.current().pid());
    return users.isEmpty() ? "" : "in use by " + String.join(", ", users);
  }

  private static Path real(Path path) {
    try {
      return path.toRealPath();
    } catch (java.io.IOException e) {
      return path;
    }
  }
}
