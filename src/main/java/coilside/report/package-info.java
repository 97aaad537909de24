/**
 * Report pages: one self-contained HTML file with pictures drawn here as SVG.
 *
 * <p>Start reading at {@link coilside.report.Report} (what a page is made from) and {@link
 * coilside.report.ReportPage}. Everything is stateless or local to one call, so any thread may
 * call.
 *
 * <p>May import: bench's values, signal, fit, shot, quantity.
 */
package coilside.report;
