/**
 * A board that plays shots, its limits, the guard in front of it, and what can go wrong.
 *
 * <p>May import: quantity, shot, signal.
 */
package coilside.board;
