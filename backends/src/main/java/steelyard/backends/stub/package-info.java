/**
 * A backend on the wire: an HTTP/1.1 server on a loopback port that carries out the reply plans of a behaviour, so that
 * faults are true on the socket.
 *
 * <p>Allowed dependencies: {@code steelyard.backends.behave}, Netty, Jackson (control front), Micrometer (load
 * page), WireMock's engine (mapping files); the last two are loaded only when they are asked for.
 *
 * <p>Thread rule: a stub lives on one event loop and its behaviour, listener and sockets are touched there only;
 * {@link steelyard.backends.stub.StubControl} may be called from any thread. Time comes from the clock that is handed
 * in.
 *
 * <p>Read {@link steelyard.backends.stub.StubControl} first.
 */
@NullMarked
package steelyard.backends.stub;

import org.jspecify.annotations.NullMarked;
