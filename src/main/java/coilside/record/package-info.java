/**
 * What is kept: the bench record (one SQLite file), captures (SigMF recordings), exports, JSON.
 *
 * <p>Start reading at {@link coilside.record.BenchRecord} (what the bench writes through), then
 * {@link coilside.record.RecordView} (what anybody may read), {@link coilside.record.CaptureReader}
 * and {@link coilside.record.Json}.
 *
 * <p>Threads: {@code BenchRecord} and {@code RecordView} may be used from any thread, one call at a
 * time each (they lock themselves); everything else is stateless or owned by one thread.
 *
 * <p>May import: bench's values and interface, shot, signal, quantity; sole importer of JDBC and of
 * the JSON library.
 */
package coilside.record;
