/**
 * The simulated bench (spins, coil, receiver) and the firmware that speaks a device profile in
 * front of it. Start reading at {@link coilside.board.simulated.Firmware} for the board's side of
 * the wire.
 *
 * <p>Threads: a firmware and the bench behind it belong to one thread. May import: board, its
 * profile, wire and link, spin, shot, signal, quantity; the TOML reader.
 */
package coilside.board.simulated;
