package steelyard.balancer.live.http;

import io.netty.util.ByteProcessor;

/**
 * Looks at every octet of a request's head for what a lenient reader would pass over and the next one might read in
 * another way: line ends that are not CR LF, folded lines, whitespace other than the two spaces of a request line,
 * control characters (RFC 9112, 2.2, 3 and 5). Counts as it goes.
 */
final class HeadScan implements ByteProcessor {
    private enum At {
        BEFORE,
        METHOD,
        TARGET,
        VERSION,
        LINE_START,
        FIELD
    }

    private At at = At.BEFORE;
    private boolean afterReturn;
    private boolean faulty;
    private int octets;
    private int method;
    private int target;

    /** The next octet is the first of a new head, or of an empty line before it. */
    void reset() {
        at = At.BEFORE;
        afterReturn = false;
        faulty = false;
        octets = 0;
        method = 0;
        target = 0;
    }

    /** The next octet is the first of a line of trailer fields. */
    void trailers() {
        reset();
        at = At.LINE_START;
    }

    /** Whether anything but empty lines was seen. */
    boolean begun() {
        return octets > 0;
    }

    boolean faulty() {
        return faulty;
    }

    /** Octets of the head so far, without empty lines before it. */
    int octets() {
        return octets;
    }

    /** Octets of the method so far. */
    int method() {
        return method;
    }

    /** Octets of the target so far. */
    int target() {
        return target;
    }

    @Override
    public boolean process(byte octet) {
        if (at != At.BEFORE) {
            octets++;
        }
        if (afterReturn) {
            afterReturn = false;
            faulty |= octet != '\n';
            lineEnded();
        } else if (octet == '\r') {
            afterReturn = true;
        } else if (octet == '\n') {
            faulty = true;
            lineEnded();
        } else {
            inside(octet);
        }
        return true;
    }

    private void lineEnded() {
        if (at != At.BEFORE) {
            at = At.LINE_START;
        }
    }

    private void inside(byte octet) {
        switch (at) {
            case BEFORE -> {
                octets++;
                method++;
                faulty |= !visible(octet);
                at = At.METHOD;
            }
            case METHOD -> {
                if (octet == ' ') {
                    at = At.TARGET;
                } else {
                    method++;
                    faulty |= !visible(octet);
                }
            }
            case TARGET -> {
                if (octet == ' ') {
                    at = At.VERSION;
                    faulty |= target == 0;
                } else {
                    target++;
                    faulty |= !visible(octet);
                }
            }
            case VERSION -> faulty |= !visible(octet);
            case LINE_START -> {
                faulty |= !visible(octet);
                at = At.FIELD;
            }
            case FIELD -> faulty |= octet >= 0 && octet < ' ' && octet != '\t' || octet == 0x7f;
        }
    }

    /** Octets above 127 are not: none belongs into a request line or a field name. */
    private static boolean visible(byte octet) {
        return octet > ' ' && octet < 0x7f;
    }
}
