/**
 * Text of a drill file to a {@link steelyard.drills.model.Drill}, or to every problem of the file at once.
 *
 * <p>Purpose: three steps, each in files of its own. {@code TreeBuilder} makes a bounded tree of nodes with places out
 * of YAML; one reader per record ({@code StageReader}, {@code PoolReader}, {@code CueReader} ...) makes typed values
 * of nodes; {@code CueSchedule}, {@code Roster} and {@code ExpectationResolver} resolve what refers to something else. A
 * reader that meets a problem notes it and goes on with a value that does no harm, so that one mistake hides no
 * other; a file with a problem yields no drill. {@code Keys} lists every key that a drill may hold, and the JSON
 * Schema lists the same ones.
 *
 * <p>Allowed dependencies: {@code steelyard.drills.model}, the event parser of snakeyaml-engine, the JDK. Thread rule:
 * no state is shared; every public method may be called from any thread. First class to read: {@link
 * steelyard.drills.read.DrillReader}.
 */
@NullMarked
package steelyard.drills.read;

import org.jspecify.annotations.NullMarked;
