package coilside.bench;

import java.time.Instant;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;

/** Keeps everything in memory, for tests. */
public final class MemoryKeeper implements Keeper {
  public final List<Capture> captures = new ArrayList<>();
  public final List<Finding> findings = new ArrayList<>();
  public final List<LogRow> rows = new ArrayList<>();
  public final List<String> notes = new ArrayList<>();
  private final Map<String, String> settings = new HashMap<>();
  int failRowsFrom = Integer.MAX_VALUE;

  @Override
  public synchronized String keep(Capture capture) {
    captures.add(capture);
    return capture.purpose() + "-" + captures.size();
  }

  @Override
  public synchronized Optional<Capture> capture(String name) {
    int number = Integer.parseInt(name.substring(name.lastIndexOf('-') + 1));
    return number <= captures.size() ? Optional.of(captures.get(number - 1)) : Optional.empty();
  }

  @Override
  public synchronized void keep(Finding finding) {
    findings.add(finding);
  }

  @Override
  public synchronized void keep(LogRow row) throws KeepException {
    if (rows.size() >= failRowsFrom) {
      throw new KeepException("the disk is full");
    }
    rows.add(row);
  }

  @Override
  public synchronized void note(Instant when, String kind, String text) {
    notes.add(kind + ": " + text);
  }

  @Override
  public synchronized List<Finding> findings(Rung rung) {
    return findings.stream().filter(f -> f.rung() == rung).toList();
  }

  @Override
  public synchronized Optional<Finding> newest(Rung rung) {
    return findings(rung).stream().reduce((a, b) -> b);
  }

  @Override
  public synchronized Optional<String> setting(String name) {
    return Optional.ofNullable(settings.get(name));
  }

  @Override
  public synchronized void setSetting(String name, String value) {
    settings.put(name, value);
  }
}
