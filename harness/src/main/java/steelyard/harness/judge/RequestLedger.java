package steelyard.harness.judge;

import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cause;

/** Every request ends once: counts, and the requests that are open now. */
final class RequestLedger extends LongTable {
    private long offered;
    private long good;
    private long failed;
    private long dueTwice;
    private long endedUndue;

    void due(long request) {
        offered++;
        if (find(request) >= 0) {
            dueTwice++;
        } else {
            add(request);
        }
    }

    void ended(long request, @Nullable Cause cause) {
        if (cause == null) {
            good++;
        } else {
            failed++;
        }
        int place = find(request);
        if (place < 0) {
            endedUndue++;
        } else {
            remove(place);
        }
    }

    boolean balanced() {
        return offered == good + failed && size() == 0 && dueTwice == 0 && endedUndue == 0;
    }

    String text() {
        String sums = offered + " offered, " + good + " good, " + failed + " failed";
        if (balanced()) {
            return sums + ", each once";
        }
        return sums + "; " + size() + " never ended, " + endedUndue + " ended twice or were never due, " + dueTwice
                + " were due twice";
    }

    @Override
    void moved(int from, int to) {}

    @Override
    void grown(int capacity, int[] places) {}
}
