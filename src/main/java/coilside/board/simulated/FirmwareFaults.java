package coilside.board.simulated;

/**
 * What goes wrong with a simulated board, for tests. A count of 0 means never; blocks and commands
 * are counted from 1 since the board was switched on.
 *
 * @param damageOneBlockIn every so many blocks one bit of the samples is turned on the wire
 * @param cutOneBlockIn every so many blocks the last quarter of the block is not sent
 * @param shortOneBlockIn every so many blocks holds one sample too few, soundly wrapped
 * @param rubbishBeforeOneAnswerIn before every so many answers some rubbish comes
 * @param silentAfterCommands after so many commands the board says nothing any more
 * @param restartAfterScans after so many scans the board starts anew, once, and greets
 * @param wrongName what the board calls itself instead; empty for its own name
 * @param remark a line that means nothing
 * @param remarkBeforeAnswer before which answer the remark comes
 */
public record FirmwareFaults(
    int damageOneBlockIn,
    int cutOneBlockIn,
    int shortOneBlockIn,
    int rubbishBeforeOneAnswerIn,
    int silentAfterCommands,
    int restartAfterScans,
    String wrongName,
    String remark,
    int remarkBeforeAnswer) {

  /** Nothing goes wrong. */
  public static FirmwareFaults none() {
    return new FirmwareFaults(0, 0, 0, 0, 0, 0, "", "", 0);
  }

  public FirmwareFaults withDamageOneBlockIn(int k) {
    return new FirmwareFaults(
        k,
        cutOneBlockIn,
        shortOneBlockIn,
        rubbishBeforeOneAnswerIn,
        silentAfterCommands,
        restartAfterScans,
        wrongName,
        remark,
        remarkBeforeAnswer);
  }

  public FirmwareFaults withCutOneBlockIn(int k) {
    return new FirmwareFaults(
        damageOneBlockIn,
        k,
        shortOneBlockIn,
        rubbishBeforeOneAnswerIn,
        silentAfterCommands,
        restartAfterScans,
        wrongName,
        remark,
        remarkBeforeAnswer);
  }

  public FirmwareFaults withShortOneBlockIn(int k) {
    return new FirmwareFaults(
        damageOneBlockIn,
        cutOneBlockIn,
        k,
        rubbishBeforeOneAnswerIn,
        silentAfterCommands,
        restartAfterScans,
        wrongName,
        remark,
        remarkBeforeAnswer);
  }

  public FirmwareFaults withRubbishBeforeOneAnswerIn(int k) {
    return new FirmwareFaults(
        damageOneBlockIn,
        cutOneBlockIn,
        shortOneBlockIn,
        k,
        silentAfterCommands,
        restartAfterScans,
        wrongName,
        remark,
        remarkBeforeAnswer);
  }

  public FirmwareFaults withSilentAfterCommands(int n) {
    return new FirmwareFaults(
        damageOneBlockIn,
        cutOneBlockIn,
        shortOneBlockIn,
        rubbishBeforeOneAnswerIn,
        n,
        restartAfterScans,
        wrongName,
        remark,
        remarkBeforeAnswer);
  }

  public FirmwareFaults withRestartAfterScans(int n) {
    return new FirmwareFaults(
        damageOneBlockIn,
        cutOneBlockIn,
        shortOneBlockIn,
        rubbishBeforeOneAnswerIn,
        silentAfterCommands,
        n,
        wrongName,
        remark,
        remarkBeforeAnswer);
  }

  public FirmwareFaults withWrongName(String name) {
    return new FirmwareFaults(
        damageOneBlockIn,
        cutOneBlockIn,
        shortOneBlockIn,
        rubbishBeforeOneAnswerIn,
        silentAfterCommands,
        restartAfterScans,
        name,
        remark,
        remarkBeforeAnswer);
  }

  public FirmwareFaults withRemark(String text, int beforeAnswer) {
    return new FirmwareFaults(
        damageOneBlockIn,
        cutOneBlockIn,
        shortOneBlockIn,
        rubbishBeforeOneAnswerIn,
        silentAfterCommands,
        restartAfterScans,
        wrongName,
        text,
        beforeAnswer);
  }
}
