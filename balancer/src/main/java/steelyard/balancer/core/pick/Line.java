package steelyard.balancer.core.pick;

import java.util.Arrays;

/** Members in a line, first come first; each at most once, and any may step out. Every call takes one step. */
final class Line {
    private static final int NOBODY = Tournament.NOBODY;

    private final int[] before;
    private final int[] after;
    private final boolean[] in;
    private int head = NOBODY;
    private int tail = NOBODY;

    Line(int members) {
        before = new int[members];
        after = new int[members];
        in = new boolean[members];
        Arrays.fill(after, NOBODY);
    }

    boolean has(int member) {
        return in[member];
    }

    /** The first in the line, or NOBODY. */
    int head() {
        return head;
    }

    /** The next behind one that is in the line, or NOBODY. */
    int after(int member) {
        return after[member];
    }

    /** Joins at the end, leaving any earlier place. */
    void join(int member) {
        leave(member);
        in[member] = true;
        before[member] = tail;
        after[member] = NOBODY;
        if (tail == NOBODY) {
            head = member;
        } else {
            after[tail] = member;
        }
        tail = member;
    }

    /** Steps out; harmless for one that is not in. */
    void leave(int member) {
        if (!in[member]) {
            return;
        }
        in[member] = false;
        int front = before[member];
        int back = after[member];
        if (front == NOBODY) {
            head = back;
        } else {
            after[front] = back;
        }
        if (back == NOBODY) {
            tail = front;
        } else {
            before[back] = front;
        }
    }
}
