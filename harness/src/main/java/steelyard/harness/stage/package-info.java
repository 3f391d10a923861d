/**
 * The stage as a port: what a play needs from whatever it is played on.
 *
 * <p>Purpose: conductor, recorder, judge and report see only these types, so that real sockets and virtual time are
 * two sides of one door. Allowed dependencies: drills.model, the words of the balancer's and the backends' pure
 * parts, harness.record; no Netty here. Thread rule: stated at each method. First class to read: {@link
 * steelyard.harness.stage.Stage}.
 */
@NullMarked
package steelyard.harness.stage;

import org.jspecify.annotations.NullMarked;
