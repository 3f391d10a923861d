package steelyard.bench;

import io.netty.buffer.ByteBufAllocator;
import io.netty.util.ResourceLeakDetector;
import io.netty.util.ResourceLeakDetectorFactory;
import java.util.concurrent.atomic.AtomicLong;

/**
 * Counts buffers that were lost without being released. To be set up before the first buffer of the process.
 *
 * <p>Netty notices a lost buffer when it was collected and another one is taken. By default it only logs what it
 * noticed, and looks at nothing where nobody logs.
 */
final class BufferLeaks {
    /** One buffer in so many is looked at during a play; each that is looked at keeps where it was used. */
    private static final ResourceLeakDetector.Level DURING_THE_PLAY = ResourceLeakDetector.Level.ADVANCED;

    private static final int TAKEN_TO_NOTICE = 64;
    private static final int TRIES = 20;

    private final AtomicLong noticed = new AtomicLong();
    private volatile boolean onPurpose;

    static BufferLeaks watch() {
        BufferLeaks leaks = new BufferLeaks();
        ResourceLeakDetectorFactory.setResourceLeakDetectorFactory(leaks.new Factory());
        ResourceLeakDetector.setLevel(DURING_THE_PLAY);
        return leaks;
    }

    /** How many were noticed so far. */
    long count() {
        notice();
        return noticed.get();
    }

    /** Whether a buffer that is lost on purpose is noticed; if not, a count of none says nothing. */
    boolean works() {
        long before = count();
        ResourceLeakDetector.setLevel(ResourceLeakDetector.Level.PARANOID);
        onPurpose = true;
        try {
            lose();
            for (int i = 0; i < TRIES && noticed.get() == before; i++) {
                notice();
            }
            return noticed.get() == before + 1;
        } finally {
            onPurpose = false;
            noticed.set(before);
            ResourceLeakDetector.setLevel(DURING_THE_PLAY);
        }
    }

    @SuppressWarnings("CheckReturnValue") // it is to be lost
    private static void lose() {
        ByteBufAllocator.DEFAULT.directBuffer(16).writeByte(1);
    }

    private static void notice() {
        System.gc();
        ResourceLeakDetector.Level level = ResourceLeakDetector.getLevel();
        ResourceLeakDetector.setLevel(ResourceLeakDetector.Level.PARANOID);
        for (int i = 0; i < TAKEN_TO_NOTICE; i++) {
            ByteBufAllocator.DEFAULT.directBuffer(16).release();
        }
        ResourceLeakDetector.setLevel(level);
    }

    private final class Factory extends ResourceLeakDetectorFactory {
        @Override
        @SuppressWarnings("deprecation") // the one that has to be there
        public <T> ResourceLeakDetector<T> newResourceLeakDetector(
                Class<T> resource, int samplingInterval, long maxActive) {
            return new Detector<>(resource, samplingInterval);
        }
    }

    private final class Detector<T> extends ResourceLeakDetector<T> {
        Detector(Class<T> resource, int samplingInterval) {
            super(resource, samplingInterval);
        }

        @Override
        protected boolean needReport() {
            return true;
        }

        @Override
        protected void reportTracedLeak(String resource, String records) {
            tell(resource, records);
        }

        @Override
        protected void reportUntracedLeak(String resource) {
            tell(resource, "");
        }

        private void tell(String resource, String records) {
            // The first says enough; one leak on a path is noticed thousands of times.
            if (noticed.incrementAndGet() == 1 && !onPurpose) {
                System.err.println("a " + resource + " was lost" + records);
            }
        }
    }
}
