/**
 * The methods: how a pool picks a backend for one unit of work.
 *
 * <p>Which suits what: {@code RoundRobin} where backends are alike and requests are too; {@code WeightedRoundRobin} where
 * backends differ by known whole weights and a person wants to read the order; {@code Stride} where weights are large
 * or odd and the order must be smooth; {@code LeastConnections} where service times vary or a backend may turn slow
 * without failing, since it counts what is still in flight; {@code HostTurns} where the host, not the backend, is what
 * runs out; {@code Random} and {@code WeightedRandom} where nothing is known and many balancers must not march in step;
 * {@code TwoChoices} where counts are old or many balancers each know only their own; {@code JoinIdleQueue} where work is
 * short and waiting behind anything is what hurts; {@code ExpectedDelayOfTwo} and {@code ExpectedDelayOfAll} where backends
 * differ in speed and nobody wants to set weights; {@code Hash} where a key has to meet the same backend again, for its
 * cache or its state.
 *
 * <p>Allowed dependencies: the JDK. Thread rule: none of these types is thread-safe; the one Decider that owns them
 * is. First class to read: {@link steelyard.balancer.core.pick.Picker}, then {@link
 * steelyard.balancer.core.pick.Tournament}, {@link steelyard.balancer.core.pick.Urn} or {@link
 * steelyard.balancer.core.pick.KeyTable}, on one of which every method stands.
 */
@NullMarked
package steelyard.balancer.core.pick;

import org.jspecify.annotations.NullMarked;
