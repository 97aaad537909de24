package coilside.board.profile;

import java.util.Optional;

/**
 * How it is proved that the right board is at the other end.
 *
 * @param ask the question; empty where the greeting alone tells
 * @param expect what the answer (or the greeting) must look like; a group "name" is what the board
 *     is called
 */
public record Identification(Optional<Template> ask, Expectation expect) {}
