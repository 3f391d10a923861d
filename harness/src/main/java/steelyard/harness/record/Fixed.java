package steelyard.harness.record;

/** Numbers in fixed formats, without allocation, the same on every machine and in every country. */
public final class Fixed {
    private static final long[] POWERS = {1, 10, 100, 1_000, 10_000, 100_000, 1_000_000};

    private Fixed() {}

    /** Nanoseconds as seconds with six decimals, rounded half up. */
    public static StringBuilder seconds(StringBuilder out, long nanos) {
        return scaled(out, Math.floorDiv(nanos + 500, 1_000L), 6);
    }

    /** Nanoseconds as milliseconds with three decimals, rounded half up. */
    static StringBuilder millis(StringBuilder out, long nanos) {
        return scaled(out, Math.floorDiv(nanos + 500, 1_000L), 3);
    }

    /** A number with that many decimals, at most six; nothing for one that is not finite. */
    static StringBuilder decimals(StringBuilder out, double value, int decimals) {
        return Double.isNaN(value) || Double.isInfinite(value)
                ? out
                : scaled(out, StrictMath.round(value * POWERS[decimals]), decimals);
    }

    /** A number with at most that many decimals, at most six, and none that is a closing zero; nothing for NaN. */
    public static StringBuilder trimmed(StringBuilder out, double value, int decimals) {
        int start = out.length();
        decimals(out, value, decimals);
        if (out.length() == start) {
            return out;
        }
        int end = out.length();
        while (out.charAt(end - 1) == '0') {
            end--;
        }
        out.setLength(out.charAt(end - 1) == '.' ? end - 1 : end);
        return out;
    }

    private static StringBuilder scaled(StringBuilder out, long units, int decimals) {
        if (units < 0) {
            out.append('-');
        }
        long size = Math.abs(units);
        out.append(size / POWERS[decimals]).append('.');
        long rest = size % POWERS[decimals];
        for (int place = decimals - 1; place > 0 && rest < POWERS[place]; place--) {
            out.append('0');
        }
        return out.append(rest);
    }
}
