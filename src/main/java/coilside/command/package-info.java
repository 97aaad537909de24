/**
 * The command line: one class a command, their common options, and what they print.
 *
 * <p>Start reading at {@link coilside.command.CommandLineInterface}. Commands run on the caller's
 * thread; an interrupt handler may stop the bench from another.
 *
 * <p>May import: bench, record, report, board and its parts (to open one), terminal, signal, fit,
 * shot, quantity; the argument parser only here.
 */
package coilside.command;
