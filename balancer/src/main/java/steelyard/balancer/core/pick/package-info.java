/**
 * The methods: how a pool picks a backend for one unit of work.
 *
 * <p>Which suits what: {@code RoundRobin} where backends are alike and requests are too; {@code WeightedRoundRobin} where
 * backends differ by known whole weights and a person wants to read the order; {@code Stride} where weights are large
 * or odd and the order must be smooth; {@code LeastConnections} where service times vary or a backend may turn slow
 * without failing, since it counts what is still in flight; {@code HostTurns} where the host, not the backend, is what
 * runs out.
 *
 * <p>Allowed dependencies: the JDK. Thread rule: none of these types is thread-safe; the one Decider that owns them
 * is. First class to read: {@link steelyard.balancer.core.pick.Picker}, then {@link
 * steelyard.balancer.core.pick.Tournament}, on which every method stands.
 */
@NullMarked
package steelyard.balancer.core.pick;

import org.jspecify.annotations.NullMarked;
