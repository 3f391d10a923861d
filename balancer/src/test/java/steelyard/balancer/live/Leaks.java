package steelyard.balancer.live;

import io.netty.util.LeakPresenceDetector;

/**
 * Counts every buffer, not a sample of them. The detector is chosen once, when the first buffer class is loaded, so
 * every test that loads one calls {@link #watch} in its first static initializer.
 */
public final class Leaks {
    private Leaks() {}

    public static void watch() {
        System.setProperty("io.netty.customResourceLeakDetector", LeakPresenceDetector.class.getName());
    }

    /** @throws IllegalStateException when a buffer was not released, or buffers are not watched */
    public static void check() {
        LeakPresenceDetector.check();
    }
}
