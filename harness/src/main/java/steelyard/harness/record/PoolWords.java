package steelyard.harness.record;

import java.util.LinkedHashMap;
import java.util.Map;
import java.util.stream.Collectors;
import steelyard.drills.model.Forwarded;
import steelyard.drills.model.Measure.Unit;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Retry;
import steelyard.drills.model.Serves;
import steelyard.drills.model.Timeouts;
import steelyard.drills.model.WarmUp;

/** The settings of a pool as a person reads them, in a fixed order. */
final class PoolWords {
    private PoolWords() {}

    static Map<String, String> settings(Pool pool) {
        Map<String, String> words = new LinkedHashMap<>();
        words.put("probe", pool.probe() == null ? "none" : probe(pool.probe()));
        words.put("warm-up", pool.warmUp() == null ? "none" : warmUp(pool.warmUp()));
        words.put("drain", "cut after " + Wording.duration(pool.drain().limitNanos()));
        words.put("retry", pool.retry() == null ? "none" : retry(pool.retry()));
        words.put("timeouts", timeouts(pool.timeouts()));
        words.put("forwarded", forwarded(pool.wire().forwarded()));
        if (pool.backends().stream().map(each -> each.serves()).distinct().count() == 1) {
            words.put("serves", serves(pool.backends().get(0).serves()));
        } else {
            pool.backends().forEach(each -> words.put("serves, " + each.name(), serves(each.serves())));
        }
        return words;
    }

    private static String forwarded(Forwarded forwarded) {
        return switch (forwarded) {
            case ADDED -> "added";
            case NOT_ADDED -> "not added";
            case HIDDEN -> "added, addresses hidden";
        };
    }

    private static String probe(Probe probe) {
        String what = probe.path() == null ? probe.kind().word() : probe.kind().word() + " " + probe.path();
        return what + " every " + Wording.duration(probe.everyNanos()) + " within "
                + Wording.duration(probe.withinNanos()) + ", " + Wording.count(probe.misses(), "miss", "misses") + ", "
                + Wording.count(probe.passes(), "pass", "passes");
    }

    private static String warmUp(WarmUp warmUp) {
        return Wording.duration(warmUp.rampNanos()) + " from " + Wording.exact(Unit.SHARE, warmUp.floor());
    }

    private static String retry(Retry retry) {
        String also = retry.also().isEmpty()
                ? ""
                : retry.also().stream().sorted().map(String::valueOf).collect(Collectors.joining(", ", ", also ", ""));
        return "at most " + retry.atMost() + ", budget " + Wording.exact(Unit.SHARE, retry.budget()) + ", bucket "
                + retry.bucket() + also;
    }

    private static String timeouts(Timeouts timeouts) {
        return "connect " + Wording.duration(timeouts.connectNanos()) + ", first byte "
                + Wording.duration(timeouts.firstByteNanos()) + ", idle " + Wording.duration(timeouts.idleNanos());
    }

    private static String serves(Serves serves) {
        Serves.Time time = serves.time();
        String law = time.law().word() + " " + Wording.duration(time.firstNanos());
        String tail = time.law() == Serves.Law.LOGNORMAL ? " median, 99 % " + Wording.duration(time.p99Nanos()) : "";
        return Wording.count(serves.workers(), "worker", "workers") + ", queue " + serves.queue() + ", " + law + tail
                + (serves.probesQueue() ? ", probes queue" : "")
                + (serves.probeLoss() > 0 ? ", probes lost " + Wording.exact(Unit.SHARE, serves.probeLoss()) : "");
    }
}
