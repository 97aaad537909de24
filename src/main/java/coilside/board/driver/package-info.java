/**
 * A board made of a profile, its dialect and a link. Start reading at {@link
 * coilside.board.driver.Boards}, which opens one behind the guard; {@link
 * coilside.board.driver.Conformance} tries whether a board does what its profile says.
 *
 * <p>Threads: a board is used from one thread at a time; {@code stop} and {@code close} from any.
 * There is no thread in here: bytes are read by whoever plays a shot, in short slices, so that a
 * stop is seen within a few hundredths of a second. May import: board and its parts, the Link
 * interface.
 */
package coilside.board.driver;
