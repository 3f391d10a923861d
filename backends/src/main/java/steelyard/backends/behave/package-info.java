/**
 * What a backend does: a queue with workers, service times and faults, and the keyed draws that feed it.
 *
 * <p>Purpose: turn (now, request) into a reply plan, the same on every stage. The stub carries the plans out on sockets;
 * a virtual stage puts them on an event queue. Neither can be told apart from here.
 *
 * <p>Allowed dependencies: the JDK's {@code java.lang} and {@code java.util}, nothing else. No clock, no thread, no
 * lock, no shared random source: time is an argument, chance is drawn by key.
 *
 * <p>Thread rule: a {@link steelyard.backends.behave.Behaviour} belongs to one thread at a time. Everything else here is
 * immutable and may be shared.
 *
 * <p>Read {@link steelyard.backends.behave.Behaviour} first, then {@link steelyard.backends.behave.Change} for the
 * faults and {@link steelyard.backends.behave.Chance} for the draws.
 */
@NullMarked
package steelyard.backends.behave;

import org.jspecify.annotations.NullMarked;
