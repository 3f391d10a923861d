/**
 * HTTP/1.1 forwarding.
 *
 * <p>Purpose: carries requests from a pool's front to the backend that the core picked, and answers back, with the
 * duties that RFC 9110 and RFC 9112 lay on an intermediary. It decides nothing: who serves, who is tried again and what
 * says close comes from the Decider. Allowed dependencies: Netty, {@code live.guard}, {@code live.tcp}, the settings,
 * the core's words. Thread rule: a client connection, its exchange and its backend connection live on one event loop
 * and are touched there only; {@link steelyard.balancer.live.http.Forwarding} may be called from any thread. First
 * class to read: {@link steelyard.balancer.live.http.Forwarding}, then {@code ClientHandler}, {@code Exchange} and
 * the two ways that it joins, {@code RequestPath} and {@code AnswerPath}.
 */
@NullMarked
package steelyard.balancer.live.http;

import org.jspecify.annotations.NullMarked;
