package coilside.board.link;

import java.util.List;
import java.util.Locale;

/** Which of the serial library's native builds may fit this computer, best first. */
final class SerialNatives {
  private SerialNatives() {}

  /**
   * @param osName as in {@code os.name}
   * @param arch as in {@code os.arch}
   * @return resource paths inside the library; empty where there is no build
   */
  static List<String> resources(String osName, String arch) {
    String os = osName.toLowerCase(Locale.ROOT);
    String cpu = arch.toLowerCase(Locale.ROOT);
    if (os.contains("mac")) {
      return under("OSX", "libjSerialComm.jnilib", os64(cpu, "aarch64", "x86_64", "x86"));
    }
    if (os.contains("win")) {
      return under("Windows", "jSerialComm.dll", os64(cpu, "aarch64", "x86_64", "x86"));
    }
    if (os.contains("freebsd")) {
      return under("FreeBSD", "libjSerialComm.so", os64(cpu, "arm64", "x86_64", "x86"));
    }
    if (os.contains("linux")) {
      return under("Linux", "libjSerialComm.so", linux(cpu));
    }
    return List.of();
  }

  private static List<String> linux(String cpu) {
    if (cpu.startsWith("ppc64le")) {
      return List.of("ppc64le");
    }
    if (cpu.equals("arm") || cpu.startsWith("armv")) {
      return List.of("armv8_32", "armv7hf", "armv6hf", "armv5");
    }
    return os64(cpu, "armv8_64", "x86_64", "x86");
  }

  private static List<String> os64(String cpu, String arm, String x64, String x86) {
    if (cpu.equals("aarch64") || cpu.equals("arm64")) {
      return List.of(arm);
    }
    if (cpu.equals("amd64") || cpu.equals("x86_64")) {
      return List.of(x64);
    }
    return cpu.matches("x86|i[3-6]86") ? List.of(x86) : List.of();
  }

  private static List<String> under(String folder, String file, List<String> kinds) {
    return kinds.stream().map(kind -> "/" + folder + "/" + kind + "/" + file).toList();
  }
}
