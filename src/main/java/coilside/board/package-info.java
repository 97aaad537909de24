/**
 * A board that plays shots, its limits, the guard in front of it, and what can go wrong.
 *
 * <p>Start reading at {@link coilside.board.Board}; {@link coilside.board.GuardedBoard} is the only
 * one, and the only maker of {@link coilside.board.ClearedShot}, without which a driver transmits
 * nothing.
 *
 * <p>Threads: a board is used from one thread at a time; stop and close from any. May import:
 * quantity, shot, signal.
 */
package coilside.board;
