/**
 * What a live play may not leave behind.
 *
 * <p>Purpose: sockets and buffers are counted after every test that opens some. Allowed dependencies: Netty's leak
 * detector, JUnit. Thread rule: any thread. First class to read: {@link steelyard.accounting.Accounting}.
 */
@NullMarked
package steelyard.accounting;

import org.jspecify.annotations.NullMarked;
