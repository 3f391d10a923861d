/**
 * The control page: what the balancer decided, counted, as OpenMetrics text behind a token.
 *
 * <p>Purpose: lets a person or a scraper look on. Counting costs a few plain additions inside the Decider's lock; meters
 * and their registry come into being with the first page. Allowed dependencies: Netty, Micrometer, {@code live.guard},
 * {@code live.tcp}, the settings, the core's words. Thread rule: pages are made on a thread of their own, so that no
 * event loop waits for one. First class to read: {@link steelyard.balancer.live.control.ControlPage}.
 */
@NullMarked
package steelyard.balancer.live.control;

import org.jspecify.annotations.NullMarked;
