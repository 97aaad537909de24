/**
 * The bench and its ladder: what must be known, how each rung is measured, what it rests on.
 *
 * <p>May import: quantity, spin, shot, signal, fit, board (not its parts).
 */
package coilside.bench;
