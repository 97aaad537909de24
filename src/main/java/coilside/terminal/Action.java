package coilside.terminal;

import java.util.function.BooleanSupplier;

/**
 * Something the operator can do on the main screen.
 *
 * @param key the key that does it
 * @param keyText how the key is written ("m or Enter")
 * @param brief one or two words for the bottom line
 * @param what one line for help and the searchable list
 * @param works whether it would do something now
 * @param run does it
 */
record Action(
    Key key, String keyText, String brief, String what, BooleanSupplier works, Runnable run) {}
