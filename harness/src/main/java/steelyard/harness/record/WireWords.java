package steelyard.harness.record;

import java.util.LinkedHashMap;
import java.util.Map;
import steelyard.drills.model.Forwarded;
import steelyard.drills.model.Front;
import steelyard.drills.model.Limits;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Timeouts;

/** How a pool speaks to clients and backends, as a person reads it. */
final class WireWords {
    private WireWords() {}

    static Map<String, String> settings(Pool pool) {
        Map<String, String> words = new LinkedHashMap<>();
        boolean octets = pool.passesOctets();
        Front.Tls tls = pool.wire().front().tls();
        if (octets || tls != null || pool.wire().backendTls()) {
            words.put("front", (octets ? "tcp" : "http") + (tls == null ? "" : ", TLS, " + certificate(tls)));
            words.put("to backends", pool.wire().backendTls() ? "TLS" : "in the clear");
        }
        words.put("timeouts", timeouts(pool.timeouts(), octets));
        if (!octets) {
            words.put("limits", limits(pool.limits()));
            words.put("forwarded", forwarded(pool.wire().forwarded()));
        }
        return words;
    }

    private static String certificate(Front.Tls tls) {
        if (tls.store() != null) {
            return "certificate of a store";
        }
        return tls.certificate() == null ? "throw-away certificate" : "certificate of a file";
    }

    private static String timeouts(Timeouts timeouts, boolean octets) {
        String connect = "connect " + Wording.duration(timeouts.connectNanos());
        String idle = ", idle " + Wording.duration(timeouts.idleNanos());
        return octets
                ? connect + idle
                : connect + ", first byte " + Wording.duration(timeouts.firstByteNanos()) + idle + ", head "
                        + Wording.duration(timeouts.headNanos()) + ", body " + Wording.duration(timeouts.bodyNanos());
    }

    private static String limits(Limits limits) {
        return "target " + size(limits.targetBytes()) + ", head " + size(limits.headBytes()) + ", body "
                + (limits.bodyBytes() == Limits.NONE ? "any" : size(limits.bodyBytes()));
    }

    private static String size(int bytes) {
        if (bytes > 0 && bytes % (1 << 20) == 0) {
            return (bytes >> 20) + " MiB";
        }
        return bytes > 0 && bytes % (1 << 10) == 0 ? (bytes >> 10) + " KiB" : bytes + " B";
    }

    private static String forwarded(Forwarded forwarded) {
        return switch (forwarded) {
            case ADDED -> "added";
            case NOT_ADDED -> "not added";
            case HIDDEN -> "added, addresses hidden";
        };
    }
}
