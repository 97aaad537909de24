package coilside;

import static com.tngtech.archunit.lang.syntax.ArchRuleDefinition.classes;
import static com.tngtech.archunit.lang.syntax.ArchRuleDefinition.noClasses;
import static com.tngtech.archunit.library.GeneralCodingRules.ACCESS_STANDARD_STREAMS;
import static com.tngtech.archunit.library.dependencies.SlicesRuleDefinition.slices;
import static org.junit.jupiter.api.Assertions.assertEquals;
import static org.junit.jupiter.api.Assertions.assertTrue;

import com.tngtech.archunit.base.DescribedPredicate;
import com.tngtech.archunit.core.domain.JavaClass;
import com.tngtech.archunit.core.domain.JavaClasses;
import com.tngtech.archunit.core.importer.ClassFileImporter;
import com.tngtech.archunit.core.importer.ImportOption;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.TreeSet;
import org.junit.jupiter.api.DynamicTest;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.TestFactory;

/** Holds the layers: who may import whom, who alone may use which library. */
class ArchitectureTest {
  private static final JavaClasses CODE =
      new ClassFileImporter()
          .withImportOption(ImportOption.Predefined.DO_NOT_INCLUDE_TESTS)
          .importPackages("coilside");

  private static final String LANTERNA = "com.googlecode.lanterna";
  private static final String SERIAL = "com.fazecast.jSerialComm";
  private static final String NATIVE = "com.sun.jna";
  private static final String MATH = "org.apache.commons.math3";
  private static final String TRANSFORM = "org.jtransforms";
  private static final String LARGE_ARRAYS = "pl.edu.icm.jlargearrays";
  private static final String ARGUMENTS = "picocli";
  private static final String TOML = "org.tomlj";
  private static final String JSON = "com.google.gson";
  private static final String DATABASE = "java.sql";
  private static final String SQLITE = "org.sqlite";

  /** The import table: package, then all it may depend on beside itself and the JDK. */
  private static final Map<String, List<String>> MAY_IMPORT = new LinkedHashMap<>();

  static {
    allow("quantity");
    allow("spin", "quantity");
    allow("shot", "quantity");
    allow("signal", "quantity", TRANSFORM, LARGE_ARRAYS);
    allow("fit", "quantity", "spin", "signal", MATH);
    allow("board", "quantity", "shot", "signal");
    allow("board.profile", "board", "shot", "quantity", TOML);
    allow("board.wire", "board", "board.profile", "shot", "quantity");
    allow("board.link", SERIAL, NATIVE);
    allow(
        "board.driver",
        "board",
        "board.profile",
        "board.wire",
        "board.link",
        "shot",
        "signal",
        "quantity");
    allow(
        "board.simulated",
        "board",
        "board.profile",
        "board.wire",
        "board.link",
        "spin",
        "shot",
        "signal",
        "quantity",
        TOML);
    allow("bench", "quantity", "spin", "shot", "signal", "fit", "board");
    allow("record", "bench", "board", "shot", "signal", "quantity", JSON, DATABASE, SQLITE);
    allow("report", "bench", "signal", "fit", "shot", "quantity");
    allow("terminal", "bench", "board", "signal", "fit", "quantity", "shot", LANTERNA);
    allow(
        "command",
        "bench",
        "record",
        "report",
        "board",
        "board.profile",
        "board.driver",
        "board.link",
        "board.simulated",
        "terminal",
        "shot",
        "signal",
        "fit",
        "quantity",
        ARGUMENTS);
  }

  private static void allow(String name, String... others) {
    MAY_IMPORT.put(name, List.of(others));
  }

  private static Set<String> packages() {
    Set<String> names = new TreeSet<>();
    for (JavaClass c : CODE) {
      if (!c.getPackageName().equals("coilside")) {
        names.add(c.getPackageName().substring("coilside.".length()));
      }
    }
    return names;
  }

  @Test
  void theScanFoundTheCode() {
    assertTrue(CODE.size() > 40, "only " + CODE.size() + " classes were scanned");
    assertEquals(
        Set.of(),
        packages().stream()
            .filter(p -> !MAY_IMPORT.containsKey(p))
            .collect(java.util.stream.Collectors.toSet()),
        "packages missing in the import table");
  }

  @TestFactory
  List<DynamicTest> everyPackageImportsOnlyWhatTheTableAllows() {
    return packages().stream()
        .map(
            name ->
                DynamicTest.dynamicTest(
                    name,
                    () ->
                        classes()
                            .that()
                            .resideInAPackage("coilside." + name)
                            .should()
                            .onlyDependOnClassesThat(allowed(name))
                            .check(CODE)))
        .toList();
  }

  private static DescribedPredicate<JavaClass> allowed(String name) {
    List<String> entries = MAY_IMPORT.get(name);
    return DescribedPredicate.describe(
        "the JDK, itself or " + entries,
        c -> {
          String p = c.getBaseComponentType().getPackageName();
          if (p.isEmpty() || p.equals("coilside." + name)) {
            return true;
          }
          if (p.startsWith("coilside")) {
            return entries.stream().anyMatch(e -> p.equals("coilside." + e));
          }
          boolean jdk =
              (p.startsWith("java.") || p.startsWith("javax.") || p.startsWith("sun.misc"))
                  && !p.startsWith(DATABASE)
                  && !p.startsWith("javax.sql");
          return jdk || entries.stream().anyMatch(e -> p.equals(e) || p.startsWith(e + "."));
        });
  }

  @Test
  void packagesAreFreeOfCycles() {
    slices().matching("coilside.(**)").should().beFreeOfCycles().check(CODE);
  }

  @Test
  void nobodyImportsMain() {
    noClasses()
        .that()
        .doNotHaveFullyQualifiedName("coilside.Main")
        .should()
        .dependOnClassesThat()
        .haveFullyQualifiedName("coilside.Main")
        .check(CODE);
  }

  @Test
  void nativeLibrariesHaveOneImporterEach() {
    assertSoleImporters(SERIAL, "Serial");
    assertSoleImporters(NATIVE, "PseudoTerminal");
  }

  private static void assertSoleImporters(String library, String namePart) {
    Set<String> importers = new TreeSet<>();
    for (JavaClass c : CODE) {
      boolean uses =
          c.getDirectDependenciesFromSelf().stream()
              .anyMatch(d -> d.getTargetClass().getPackageName().startsWith(library));
      if (uses) {
        importers.add(c.getName());
      }
    }
    assertTrue(
        importers.stream()
            .allMatch(n -> n.startsWith("coilside.board.link.") && n.contains(namePart)),
        library + " is imported by " + importers);
  }

  @Test
  void onlyCommandAndTerminalTouchTheStandardStreams() {
    noClasses()
        .that()
        .resideOutsideOfPackages("coilside", "coilside.command", "coilside.terminal")
        .should(ACCESS_STANDARD_STREAMS)
        .check(CODE);
  }

  @Test
  void theMeasuringSideNeverSeesTheSimulatedTruth() {
    noClasses()
        .that()
        .resideOutsideOfPackage("coilside.board.simulated")
        .should()
        .dependOnClassesThat()
        .haveSimpleNameStartingWith("SimulatedTruth")
        .check(CODE);
    noClasses()
        .that()
        .resideInAnyPackage("coilside.bench", "coilside.fit", "coilside.signal", "coilside.record")
        .should()
        .dependOnClassesThat()
        .resideInAPackage("coilside.board.simulated")
        .check(CODE);
  }

  /** A package-info without annotations leaves no class file, so the source tree is looked at. */
  @TestFactory
  List<DynamicTest> everyPackageIsDescribed() {
    return packages().stream()
        .map(
            name ->
                DynamicTest.dynamicTest(
                    name,
                    () ->
                        assertTrue(
                            Files.isRegularFile(
                                Path.of("src/main/java/coilside")
                                    .resolve(name.replace('.', '/'))
                                    .resolve("package-info.java")),
                            "coilside." + name + " has no package-info")))
        .toList();
  }

  @Test
  void theTableNamesOnlyPackagesThatExistOrAreTheJdk() {
    Set<String> known = new TreeSet<>(MAY_IMPORT.keySet());
    MAY_IMPORT.forEach(
        (name, entries) ->
            entries.stream()
                .filter(e -> !e.contains(".") || e.startsWith("board."))
                .filter(e -> !e.equals(ARGUMENTS))
                .forEach(e -> assertTrue(known.contains(e), name + " may import " + e)));
  }
}
