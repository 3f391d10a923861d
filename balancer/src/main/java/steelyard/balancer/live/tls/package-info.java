/**
 * TLS on the way from clients and on the way to backends.
 *
 * <p>Purpose: certificates from files, stores or made at the start; TLS 1.2 and newer, no protocol negotiation, whatever
 * server name a client asks for. Allowed dependencies: Netty, the settings. Thread rule: contexts may be used from any
 * thread, a connection's handler on its loop. First class to read: {@link steelyard.balancer.live.tls.FrontTls}.
 */
@NullMarked
package steelyard.balancer.live.tls;

import org.jspecify.annotations.NullMarked;
