/**
 * Links: how bytes travel to a board and back. Start reading at {@link coilside.board.link.Link}.
 *
 * <p>May import: the JDK; jSerialComm only in the serial part, JNA only in the pseudo-terminal
 * part.
 */
package coilside.board.link;
