package coilside.report;

import coilside.bench.Conditions;
import coilside.bench.Finding;
import coilside.bench.LogRow;
import coilside.bench.Picture;
import coilside.bench.Refusal;
import coilside.bench.RungStatus;
import coilside.quantity.AgeFormat;
import coilside.quantity.ConciseFormat;
import coilside.quantity.Measured;
import java.time.Duration;
import java.time.temporal.ChronoUnit;
import java.util.List;
import java.util.Locale;
import java.util.Map;

/**
 * A report as one HTML page that needs nothing else: no network, no script, pictures as inline SVG;
 * light or dark as the reader's system says, printable. All text from outside is escaped.
 */
public final class ReportPage {
  private static final String STYLE =
      """
      :root{--ink:#1b1f24;--paper:#fff;--faint:#d8dde3;--soft:#57606a;--blue:#0058a8;--orange:#b35900;--grey:#8a929b}
      @media (prefers-color-scheme:dark){:root{--ink:#e6e9ed;--paper:#14171b;--faint:#353b43;--soft:#a3abb5;--blue:#6db3f2;--orange:#f0a050;--grey:#77808a}}
      @media print{:root{--ink:#000;--paper:#fff;--faint:#ccc;--soft:#333;--blue:#0058a8;--orange:#b35900;--grey:#777}figure,section{break-inside:avoid}}
      body{margin:0 auto;max-width:46rem;padding:1.5rem;background:var(--paper);color:var(--ink);font:15px/1.5 system-ui,sans-serif}
      h1{font-size:1.5rem;margin:0 0 .3rem}h2{font-size:1.15rem;margin:2rem 0 .5rem}h3{font-size:1rem;margin:1.2rem 0 .2rem}
      table{border-collapse:collapse;width:100%}th,td{text-align:left;vertical-align:top;padding:.25rem .6rem .25rem 0;border-bottom:1px solid var(--faint)}
      .value{font-variant-numeric:tabular-nums;white-space:nowrap}.soft,.note{color:var(--soft)}.caution{border:2px solid var(--orange);padding:.4rem .8rem}
      figure{margin:1rem 0}figcaption{color:var(--soft)}svg{width:100%;height:auto;display:block}
      svg text{fill:var(--ink);font:12px system-ui,sans-serif}svg .grid{stroke:var(--faint)}svg .frame{fill:none;stroke:var(--soft)}
      svg path{fill:none;stroke-width:1.4}svg path.data{stroke:var(--blue)}svg path.imaginary{stroke:var(--grey)}svg path.fit{stroke:var(--orange);stroke-width:3}
      svg path.band{stroke:var(--grey);stroke-dasharray:3 3}svg circle.data{fill:var(--blue)}svg .bar{stroke:var(--blue)}
      """;

  private ReportPage() {}

  /** The page. */
  public static String html(Report report) {
    StringBuilder out = new StringBuilder();
    out.append("<!DOCTYPE html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n");
    out.append("<meta name=\"viewport\" content=\"width=device-width, initial-scale=1\">\n");
    out.append("<title>").append(Markup.text("Bench report: " + report.sample()));
    out.append("</title>\n<style>\n").append(STYLE).append("</style>\n</head>\n<body>\n");
    head(report, out);
    ladder(report, out);
    for (RungStatus status : report.ladder()) {
      status.finding().ifPresent(finding -> details(status, finding, report, out));
    }
    if (!report.pictures().isEmpty()) {
      out.append("<h2>Pictures</h2>\n");
      out.append("<p class=\"soft\">Blue: measured (the real part of an FID; grey, the");
      out.append(" imaginary part). Orange: fitted. Bars: one standard uncertainty.</p>\n");
      for (Picture picture : report.pictures()) {
        out.append(Figures.of(picture));
      }
    }
    log(report.log(), out);
    out.append("<p class=\"soft\">Numbers in brackets are standard uncertainties (one standard");
    out.append(" deviation) in units of the last digits.</p>\n</body>\n</html>\n");
    return out.toString();
  }

  private static void head(Report report, StringBuilder out) {
    boolean ready = report.ladder().stream().allMatch(s -> s.state() == RungStatus.State.FRESH);
    out.append("<h1>Bench report</h1>\n<p>").append(Markup.text(report.board()));
    out.append(" · sample: ").append(Markup.text(report.sample())).append("<br>\nmade ");
    out.append(report.made().truncatedTo(ChronoUnit.SECONDS)).append(" · ");
    out.append(ready ? "every rung is fresh" : "not every rung is fresh").append("</p>\n");
    if (report.simulated()) {
      out.append("<p class=\"caution\">Measured on a simulated bench.</p>\n");
    }
  }

  private static void ladder(Report report, StringBuilder out) {
    out.append("<h2>The ladder</h2>\n<table>\n<tr><th>rung</th><th>state</th><th>value</th>");
    out.append("<th>age</th></tr>\n");
    for (RungStatus status : report.ladder()) {
      out.append("<tr><td>").append(Markup.text(status.rung().id())).append("</td><td>");
      out.append(mark(status.state())).append("</td><td class=\"value\">");
      out.append(status.finding().map(ReportPage::headline).orElse("")).append("</td><td>");
      out.append(status.finding().map(f -> age(f, report)).orElse("")).append("</td></tr>\n");
    }
    out.append("</table>\n");
  }

  /** A word and a mark, never colour alone. */
  private static String mark(RungStatus.State state) {
    String sign =
        switch (state) {
          case FRESH -> "●";
          case STALE -> "◐";
          case MISSING -> "○";
          case REFUSED -> "✕";
        };
    return sign + " " + state.name().toLowerCase(Locale.ROOT);
  }

  private static String headline(Finding finding) {
    return finding.values().entrySet().stream()
        .findFirst()
        .map(e -> Markup.text(words(e.getKey()) + " " + ConciseFormat.text(e.getValue())))
        .orElse("");
  }

  private static String age(Finding finding, Report report) {
    double seconds = Duration.between(finding.started(), report.made()).toMillis() / 1e3;
    return seconds < 0 ? "from the future: check the clock" : AgeFormat.text(seconds);
  }

  private static String words(String name) {
    return name.replace('_', ' ');
  }

  private static void details(RungStatus status, Finding f, Report report, StringBuilder out) {
    out.append("<section>\n<h3>").append(Markup.text(status.rung().id())).append(": ");
    out.append(Markup.text(status.rung().title())).append("</h3>\n");
    if (!f.values().isEmpty()) {
      out.append("<table>\n");
      for (Map.Entry<String, Measured> entry : f.values().entrySet()) {
        Measured m = entry.getValue();
        out.append("<tr><td>").append(Markup.text(words(entry.getKey())));
        out.append("</td><td class=\"value\">").append(Markup.text(ConciseFormat.text(m)));
        out.append("</td><td class=\"soft\">").append(Markup.text(m.whyNoUncertainty()));
        out.append("</td></tr>\n");
      }
      out.append("</table>\n");
    }
    f.refusal().ifPresent(refusal -> refusal(refusal, out));
    list("Why it is not fresh", status.reasons(), out);
    list("Warnings", f.warnings(), out);
    out.append("<p class=\"soft\">").append(conditions(f, report)).append("</p>\n</section>\n");
  }

  private static void refusal(Refusal refusal, StringBuilder out) {
    out.append("<p><b>Refused:</b> ").append(Markup.text(refusal.reason())).append("</p>\n");
    list("Likely causes", refusal.likelyCauses(), out);
  }

  private static void list(String title, List<String> items, StringBuilder out) {
    if (items.isEmpty()) {
      return;
    }
    out.append("<p><b>").append(title).append("</b></p>\n<ul>\n");
    for (String item : items) {
      out.append("<li>").append(Markup.text(item)).append("</li>\n");
    }
    out.append("</ul>\n");
  }

  private static String conditions(Finding f, Report report) {
    Conditions c = f.conditions();
    StringBuilder out = new StringBuilder();
    out.append("measured ").append(f.started().truncatedTo(ChronoUnit.SECONDS)).append(" (");
    out.append(age(f, report)).append(" before this report), ").append(f.scans());
    out.append(" scans; carrier ").append(number("%.6f", c.carrierHertz() / 1e6)).append(" MHz");
    out.append(", amplitude ").append(number("%.3g", c.amplitude())).append(", gain ");
    out.append(number("%.4g", c.gainDecibels())).append(" dB");
    c.temperatureCelsius().ifPresent(t -> out.append(", ").append(number("%.2f °C", t)));
    String text = out + "; sample: " + c.sample() + "; coil: " + c.coil();
    return Markup.text(f.capture().isEmpty() ? text : text + "; capture " + f.capture());
  }

  private static String number(String form, double x) {
    return String.format(Locale.ROOT, form, x);
  }

  private static void log(List<LogRow> rows, StringBuilder out) {
    if (rows.isEmpty()) {
      return;
    }
    out.append("<h2>Log</h2>\n").append(Figures.log(rows));
    List<LogRow> gaps = rows.stream().filter(r -> !r.note().isEmpty()).limit(100).toList();
    if (!gaps.isEmpty()) {
      out.append("<table>\n<tr><th>row</th><th>time</th><th>note</th></tr>\n");
      for (LogRow row : gaps) {
        out.append("<tr><td>").append(row.number()).append("</td><td>");
        out.append(row.started().truncatedTo(ChronoUnit.SECONDS)).append("</td><td>");
        out.append(Markup.text(row.note())).append("</td></tr>\n");
      }
      out.append("</table>\n");
    }
  }
}
