package steelyard.harness.judge;

import java.util.Arrays;
import steelyard.balancer.core.decide.Outcome;
import steelyard.harness.record.Words;

/** How many attempts the balancer and the backends tell of alike, and how many not, by what is odd about them. */
final class AttemptTally {
    private static final Outcome[] OUTCOMES = Outcome.values();

    private final long[] apart = new long[OUTCOMES.length];
    private final long[] unread = new long[OUTCOMES.length];
    private long agreed;
    long differing;
    long pickedTwice;
    long endedUnpicked;
    long readUnsent;
    long leftUnread;
    long belated;
    long foreign;
    long openInBalancer;
    long openInBackend;
    long leftBehind;
    long connections;

    /**
     * Counts an attempt that is over for both sides.
     *
     * @param received whether a backend read it
     * @param inFull whether a backend left it with all of the answer that the balancer tells of
     */
    void count(Outcome how, boolean received, boolean inFull) {
        if (how == Outcome.ANSWERED) {
            agreed += inFull ? 1 : 0;
            differing += inFull ? 0 : 1;
            return;
        }
        apart[how.ordinal()]++;
        if (!received) {
            unread[how.ordinal()]++;
        } else if (how == Outcome.REFUSED) {
            differing++;
        }
    }

    /** @param complete whether the play was played to its end; otherwise attempts that it broke off are no mistake */
    boolean agrees(boolean complete) {
        long unreadSum = Arrays.stream(unread).sum();
        return differing + pickedTwice + endedUnpicked + readUnsent + leftUnread == 0
                && belated <= unreadSum - unread[Outcome.REFUSED.ordinal()]
                && (!complete || openInBalancer + openInBackend == 0);
    }

    String text() {
        StringBuilder text = new StringBuilder().append(agreed).append(" agree");
        for (Outcome each : OUTCOMES) {
            if (apart[each.ordinal()] > 0) {
                text.append(", ").append(apart[each.ordinal()]).append(' ').append(Words.of(each));
                if (unread[each.ordinal()] > 0) {
                    text.append(" (").append(unread[each.ordinal()]).append(" not read)");
                }
            }
        }
        note(text, connections, "were connections, which the balancer alone counts");
        note(text, belated, "read after they were given up");
        note(text, foreign, "not of this play");
        note(text, leftBehind, "given up and left in a backend");
        note(text, differing, "told differently by balancer and backend");
        note(text, pickedTwice, "picked twice");
        note(text, endedUnpicked, "ended twice or never picked");
        note(text, readUnsent, "read twice or by another backend");
        note(text, leftUnread, "ended by a backend twice or without being read");
        note(text, openInBalancer, "never ended by the balancer");
        note(text, openInBackend, "answered but never ended by a backend");
        return text.toString();
    }

    private static void note(StringBuilder text, long count, String what) {
        if (count > 0) {
            text.append(", ").append(count).append(' ').append(what);
        }
    }
}
