package coilside.report;

import coilside.bench.LogRow;
import coilside.bench.Picture;
import coilside.bench.RungStatus;
import java.time.Instant;
import java.util.List;

/**
 * What a report page is made from.
 *
 * @param made when it is made, UTC; ages count from here
 * @param board what the board says it is
 * @param sample what is in the coil
 * @param simulated true when a simulated bench was measured, which the page then says
 * @param ladder every rung as it stands
 * @param pictures the pictures to show, in order
 * @param log rows of a log to draw as strip charts; empty for none
 */
public record Report(
    Instant made,
    String board,
    String sample,
    boolean simulated,
    List<RungStatus> ladder,
    List<Picture> pictures,
    List<LogRow> log) {
  public Report {
    ladder = List.copyOf(ladder);
    pictures = List.copyOf(pictures);
    log = List.copyOf(log);
  }
}
