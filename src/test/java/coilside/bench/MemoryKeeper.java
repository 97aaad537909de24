package coilside.bench;

import java.time.Instant;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;

/** Keeps everything in memory, for tests. */
public final class MemoryKeeper implements Keeper {
  public final List<Capture> captures = new ArrayList<>();
  public final List<Finding> findings = new ArrayList<>();
  public final List<LogRow> rows = new ArrayList<>();
  public final List<String> notes = new ArrayList<>();
  int failRowsFrom = Integer.MAX_VALUE;

  @Override
  public String keep(Capture capture) {
    captures.add(capture);
    return "capture-" + (captures.size() - 1);
  }

  @Override
  public void keep(Finding finding) {
    findings.add(finding);
  }

  @Override
  public void keep(LogRow row) throws KeepException {
    if (rows.size() >= failRowsFrom) {
      throw new KeepException("the disk is full");
    }
    rows.add(row);
  }

  @Override
  public void note(Instant when, String kind, String text) {
    notes.add(kind + ": " + text);
  }

  @Override
  public List<Finding> findings(Rung rung) {
    return findings.stream().filter(f -> f.rung() == rung).toList();
  }

  @Override
  public Optional<Finding> newest(Rung rung) {
    return findings(rung).stream().reduce((a, b) -> b);
  }

  @Override
  public Optional<String> setting(String name) {
    return Optional.empty();
  }

  @Override
  public void setSetting(String name, String value) {}
}
