/**
 * Dialects as pure functions and state machines: commands to bytes, bytes to replies and sample
 * blocks. Start reading at {@link coilside.board.wire.CommandEncoder} (out) and {@link
 * coilside.board.wire.WireDecoder} (in).
 *
 * <p>No I/O, no clock, no threads: an object here is used from one thread. Input is hostile: every
 * length is bounded before it is believed, damage is an event, never an exception, and decoding
 * goes on at the next good message. May import: board, board.profile, shot, quantity.
 */
package coilside.board.wire;
