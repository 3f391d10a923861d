/**
 * All backends of a play, started, driven and stopped together.
 *
 * <p>Purpose: the port through which a stage gets its backends, wherever they run. {@link
 * steelyard.backends.fleet.EmbeddedFleet} runs them in this process.
 *
 * <p>Allowed dependencies: {@code steelyard.backends.behave}, {@code steelyard.backends.stub}, Netty's event loops.
 *
 * <p>Thread rule: a fleet is started and closed by one thread; {@code address}, {@code apply} and {@code figures} may be
 * called from any thread in between.
 *
 * <p>Read {@link steelyard.backends.fleet.Fleet} first.
 */
@NullMarked
package steelyard.backends.fleet;

import org.jspecify.annotations.NullMarked;
