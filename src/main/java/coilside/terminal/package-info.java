/**
 * The text interface: one screen that shows what the bench is doing and which of its numbers can be
 * trusted, and a line-by-line form of the same for screen readers.
 *
 * <p>Start reading at {@link coilside.terminal.TextInterface}, then {@code Cockpit} (what the
 * screen shows and which key does what), then {@code Canvas} and {@code Plot} (how it is drawn).
 *
 * <p>Threads: the bench's thread only enters {@code Watch}, which keeps the latest state and
 * returns at once. Everything else belongs to the one drawing thread, so a blocked terminal never
 * holds up a measurement.
 *
 * <p>May import: bench, board (identity and limits only), signal, fit, quantity, shot; Lanterna,
 * which nobody else imports.
 */
package coilside.terminal;
