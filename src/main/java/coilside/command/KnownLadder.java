package coilside.command;

import coilside.bench.Conditions;
import coilside.bench.Finding;
import coilside.bench.KeepException;
import coilside.bench.LadderView;
import coilside.bench.LogRow;
import coilside.bench.Rung;
import coilside.bench.RungStatus;
import coilside.record.BenchRecord;
import coilside.record.RecordView;
import java.nio.file.Files;
import java.time.Clock;
import java.time.Instant;
import java.util.ArrayList;
import java.util.EnumMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.OptionalDouble;

/** The ladder as the record knows it, read without a board and beside whoever holds it. */
final class KnownLadder implements AutoCloseable {
  private final Optional<RecordView> view;
  private final CommonOptions options;
  private final Clock clock = Clock.systemUTC();

  private KnownLadder(Optional<RecordView> view, CommonOptions options) {
    this.view = view;
    this.options = options;
  }

  static KnownLadder open(CommonOptions options) throws KeepException {
    boolean there = Files.exists(options.captures.resolve(BenchRecord.FILE_NAME));
    return new KnownLadder(
        there ? Optional.of(BenchRecord.watch(options.captures)) : Optional.empty(), options);
  }

  /** The ladder in a record that is open already, which is closed together with it. */
  static KnownLadder on(RecordView view, CommonOptions options) {
    return new KnownLadder(Optional.of(view), options);
  }

  /** How the bench stood at its newest finding. */
  Optional<Conditions> lastConditions() throws KeepException {
    return LadderView.last(findings());
  }

  /** All findings by rung, oldest first. */
  Map<Rung, List<Finding>> findings() throws KeepException {
    Map<Rung, List<Finding>> findings = new EnumMap<>(Rung.class);
    for (Rung rung : Rung.values()) {
      findings.put(rung, history(rung));
    }
    return findings;
  }

  Instant now() {
    return clock.instant();
  }

  List<Finding> history(Rung rung) throws KeepException {
    return view.isPresent() ? view.get().findings(rung) : List.of();
  }

  List<RungStatus> ladder() throws KeepException {
    Map<Rung, List<Finding>> findings = findings();
    Conditions last =
        LadderView.last(findings)
            .orElse(new Conditions("", "", 1, 0, 0, "", "", OptionalDouble.empty()));
    String digest =
        options.board == null
            ? last.profileDigest()
            : Profiles.read(BoardAddress.parse(options.board).profile()).digest();
    Conditions now =
        new Conditions(
            last.board(),
            digest,
            last.carrierHertz(),
            setting("amplitude", options.amplitude)
                .map(Double::parseDouble)
                .orElse(last.amplitude()),
            last.gainDecibels(),
            setting("sample", options.sample).orElse(last.sample()),
            setting("coil", options.coil).orElse(last.coil()),
            last.temperatureCelsius());
    return LadderView.of(findings, now, clock.instant());
  }

  /** The rows of the newest log run, the last few thousand of them. */
  List<LogRow> newestLog() throws KeepException {
    List<LogRow> rows = new ArrayList<>();
    if (view.isPresent() && !view.get().runs().isEmpty()) {
      List<RecordView.LogRun> runs = view.get().runs();
      view.get().rows(runs.get(runs.size() - 1).run(), rows::add);
    }
    int most = 5000;
    return rows.size() <= most ? rows : rows.subList(rows.size() - most, rows.size());
  }

  private Optional<String> setting(String name, String given) throws KeepException {
    if (given != null) {
      return Optional.of(
          name.equals("amplitude")
              ? Double.toString(Values.fraction("--amplitude", given))
              : given);
    }
    return view.isPresent() ? view.get().setting(name) : Optional.empty();
  }

  @Override
  public void close() {
    view.ifPresent(RecordView::close);
  }
}
