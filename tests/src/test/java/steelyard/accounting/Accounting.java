package steelyard.accounting;

import static org.assertj.core.api.Assertions.assertThat;

import io.netty.util.LeakPresenceDetector;
import java.time.Duration;
import org.awaitility.Awaitility;
import org.junit.jupiter.api.extension.AfterEachCallback;
import org.junit.jupiter.api.extension.BeforeEachCallback;
import org.junit.jupiter.api.extension.ExtensionContext;

/**
 * After each live test: no socket is open that was not open before, and no buffer is left.
 *
 * <p>Every buffer is counted, not a sample of them. Netty chooses its leak detector when the first buffer class is
 * loaded, so a test that loads one has to carry this extension, or to run after one that does; the check fails where
 * buffers are not counted.
 */
public final class Accounting implements BeforeEachCallback, AfterEachCallback {
    private static final Duration LONGEST_CLOSING = Duration.ofSeconds(20);

    static {
        System.setProperty("io.netty.customResourceLeakDetector", LeakPresenceDetector.class.getName());
    }

    private long before;

    @Override
    public void beforeEach(ExtensionContext test) {
        before = OpenSockets.count();
    }

    @Override
    public void afterEach(ExtensionContext test) {
        Awaitility.await()
                .atMost(LONGEST_CLOSING)
                .untilAsserted(
                        () -> assertThat(OpenSockets.count()).as("open sockets").isLessThanOrEqualTo(before));
        LeakPresenceDetector.check();
    }
}
