package steelyard.harness.judge;

import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Cause;
import steelyard.harness.record.Wording;

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

    /** @param complete whether the play was played to its end; an interrupted one leaves requests open */
    boolean balanced(boolean complete) {
        return offered == good + failed + size() && (!complete || size() == 0) && dueTwice == 0 && endedUndue == 0;
    }

    String text(boolean complete) {
        String sums = offered + " offered, " + good + " good, " + failed + " failed";
        if (balanced(complete)) {
            return size() == 0
                    ? sums + ", each once"
                    : sums + ", each once; " + Wording.count(size(), "was", "were")
                            + " open when the play was interrupted";
        }
        return sums + "; " + size() + " never ended, " + endedUndue + " ended twice or were never due, " + dueTwice
                + " were due twice";
    }

    @Override
    void moved(int from, int to) {}

    @Override
    void grown(int capacity, int[] places) {}
}
