package coilside.board.profile;

import coilside.board.BoardLimits;
import java.util.List;
import java.util.Map;
import java.util.Optional;

/**
 * How one kind of board is spoken to: everything a profile file says, checked.
 *
 * @param name the profile's name
 * @param note one line about the board; may be empty
 * @param digest SHA-256 of the file, lower-case hexadecimal
 * @param serial how it is opened on a serial port
 * @param tcp where it listens on a network
 * @param settleSeconds wait between opening and the first byte, s
 * @param greeting what the board says by itself after opening
 * @param framing lines or frames
 * @param identification how it is recognised
 * @param replies success and errors
 * @param values how each named value travels
 * @param commands what is said to the board
 * @param setup sent once after identification, in order, each answered in the usual way
 * @param farewell sent before the link is closed
 * @param keepsShot true when the board keeps its shot, so that unchanged settings and an unchanged
 *     shot need not be sent again
 * @param blocks how samples are wrapped
 * @param samples what sample bytes mean
 * @param clockTickSeconds the board's clock tick, s; 0 where not told
 * @param boardLimits what the board itself can do
 * @param limits the same narrowed by the operator: what the guard uses
 * @param operator the bench behind the board
 */
public record DeviceProfile(
    String name,
    String note,
    String digest,
    Optional<SerialAttachment> serial,
    Optional<TcpAttachment> tcp,
    double settleSeconds,
    Optional<Expectation> greeting,
    Framing framing,
    Identification identification,
    Replies replies,
    Map<ValueName, WireValue> values,
    Map<CommandName, Command> commands,
    List<Template> setup,
    List<Template> farewell,
    boolean keepsShot,
    SampleBlocks blocks,
    SampleFormat samples,
    double clockTickSeconds,
    BoardLimits boardLimits,
    BoardLimits limits,
    OperatorSection operator) {
  public DeviceProfile {
    values = Map.copyOf(values);
    commands = Map.copyOf(commands);
    setup = List.copyOf(setup);
    farewell = List.copyOf(farewell);
  }

  /** The command, where the profile gives it. */
  public Optional<Command> command(CommandName name) {
    return Optional.ofNullable(commands.get(name));
  }

  /** True for a board that plays only "pulse then receive". */
  public boolean fixedShotOnly() {
    return commands.containsKey(CommandName.PULSE_AND_RECEIVE);
  }
}
