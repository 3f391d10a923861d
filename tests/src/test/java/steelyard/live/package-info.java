/**
 * Live plays on real sockets, short and at low rates.
 *
 * <p>Purpose: what only real time and real sockets can show. Allowed dependencies: everything. Thread rule: a test plays
 * on its own thread; what was heard is read after the play. First class to read: {@link steelyard.live.LiveStageTest}.
 */
@NullMarked
package steelyard.live;

import org.jspecify.annotations.NullMarked;
