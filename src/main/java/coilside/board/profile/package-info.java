/**
 * The device profile: a text file that says how one kind of board is spoken to, as immutable
 * values. Start reading at {@link coilside.board.profile.DeviceProfile}; {@link
 * coilside.board.profile.ProfileReader} makes one from a file, or lists everything wrong with it.
 *
 * <p>The model is data only. How a number is written on the wire is the business of {@code
 * board.wire}; the simulated firmware reads the same model and works it out on its own, so that no
 * common helper can hide a mistake of both.
 *
 * <p>Threads: all values are immutable. May import: board, shot, quantity, the TOML reader.
 */
package coilside.board.profile;
