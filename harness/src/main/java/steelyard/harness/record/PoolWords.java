package steelyard.harness.record;

import java.util.LinkedHashMap;
import java.util.Map;
import java.util.stream.Collectors;
import steelyard.drills.model.Affinity;
import steelyard.drills.model.Bench;
import steelyard.drills.model.Delay;
import steelyard.drills.model.Drain;
import steelyard.drills.model.Hashing;
import steelyard.drills.model.InFlight;
import steelyard.drills.model.LoadProbe;
import steelyard.drills.model.Measure.Unit;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Probe;
import steelyard.drills.model.Reserve;
import steelyard.drills.model.Retry;
import steelyard.drills.model.WarmUp;

/** The settings of a pool as a person reads them, in a fixed order; what plays no part for a pool is left out. */
final class PoolWords {
    private PoolWords() {}

    static Map<String, String> settings(Pool pool) {
        Map<String, String> words = new LinkedHashMap<>();
        picking(words, pool);
        words.put("probe", pool.probe() == null ? "none" : probe(pool.probe()));
        if (pool.health().bench() != null) {
            words.put("bench", bench(pool.health().bench()));
        }
        if (pool.health().load() != null) {
            words.put("load", load(pool.health().load()));
        }
        reserve(words, pool.reserve());
        if (pool.inFlight() != null) {
            words.put("in flight", inFlight(pool.inFlight()));
        }
        words.put("warm-up", pool.warmUp() == null ? "none" : warmUp(pool.warmUp()));
        words.put("drain", drain(pool.drain()));
        words.put("retry", pool.retry() == null ? "none" : retry(pool.retry()));
        words.putAll(WireWords.settings(pool));
        if (pool.backends().stream().map(each -> each.serves()).distinct().count() == 1) {
            words.put("serves", ServesWords.of(pool.backends().get(0).serves()));
        } else {
            pool.backends().forEach(each -> words.put("serves, " + each.name(), ServesWords.of(each.serves())));
        }
        return words;
    }

    private static void picking(Map<String, String> words, Pool pool) {
        Hashing hash = pool.picking().hash();
        if (hash != null) {
            words.put("hash", hash(hash));
        }
        Delay delay = pool.picking().delay();
        if (delay != null) {
            words.put("delay", "of " + delay.candidates().word() + ", memory " + Wording.duration(delay.memoryNanos()));
        }
        Affinity affinity = pool.picking().affinity();
        if (affinity != null) {
            String cookie = affinity.cookie() == null ? "" : " " + affinity.cookie();
            words.put(
                    "affinity",
                    "by " + affinity.by().word() + cookie + ", lasts " + Wording.duration(affinity.lastsNanos()));
        }
    }

    private static String hash(Hashing hash) {
        String name = hash.name() == null ? "" : " " + hash.name();
        String table = switch (hash.table()) {
            case RING -> "ring, " + Wording.count(hash.points(), "point", "points") + " per unit of weight";
            case RENDEZVOUS -> "rendezvous";
            case PERMUTATION -> "permutation of " + hash.size();
        };
        String bound = hash.bound() == 0 ? "" : ", bound " + Wording.exact(Unit.SHARE, hash.bound());
        return "by " + hash.by().word() + name + ", " + table + bound;
    }

    private static String probe(Probe probe) {
        String what = probe.path() == null ? probe.kind().word() : probe.kind().word() + " " + probe.path();
        String jitter = probe.jitter() == 0 ? "" : ", jitter " + Wording.exact(Unit.SHARE, probe.jitter());
        return what + " every " + Wording.duration(probe.everyNanos()) + " within "
                + Wording.duration(probe.withinNanos()) + ", " + Wording.count(probe.misses(), "miss", "misses") + ", "
                + Wording.count(probe.passes(), "pass", "passes") + jitter;
    }

    private static String bench(Bench bench) {
        String share = bench.share() == 0
                ? ""
                : " or at " + Wording.exact(Unit.SHARE, bench.share()) + " of at least " + bench.least() + " over "
                        + Wording.duration(bench.overNanos());
        return "after " + Wording.count(bench.after(), "failure", "failures") + " in a row" + share + ", for "
                + Wording.duration(bench.timeNanos()) + " up to " + Wording.duration(bench.mostNanos()) + ", quiet "
                + Wording.duration(bench.quietNanos()) + ", at most " + Wording.exact(Unit.SHARE, bench.cap())
                + " of the pool";
    }

    private static String load(LoadProbe load) {
        String gauges = load.gauges().stream()
                .map(each -> each.name() + " to " + Wording.exact(Unit.SHARE, each.ceiling())
                        + (each.gain() == 1 ? "" : " gain " + Wording.exact(Unit.NUMBER, each.gain())))
                .collect(Collectors.joining(", "));
        String cost = load.costNanos() == 0 ? "" : ", cost " + Wording.duration(load.costNanos());
        return load.path() + " every " + Wording.duration(load.everyNanos()) + " within "
                + Wording.duration(load.withinNanos()) + ", stale after " + Wording.duration(load.staleAfterNanos())
                + ", floor " + Wording.exact(Unit.SHARE, load.floor()) + cost + ", " + gauges;
    }

    private static void reserve(Map<String, String> words, Reserve reserve) {
        if (reserve.lastResort() > 0) {
            words.put("last resort", "below " + Wording.exact(Unit.SHARE, reserve.lastResort()) + " pickable");
        }
        if (reserve.standby() > 0) {
            words.put("standby", "below " + Wording.exact(Unit.SHARE, reserve.standby()) + " of tier 1 pickable");
        }
    }

    private static String inFlight(InFlight inFlight) {
        String waiting = inFlight.waiting() == 0
                ? "none waits"
                : inFlight.waiting() + " wait up to " + Wording.duration(inFlight.waitNanos());
        return "at most " + inFlight.most() + " a backend, " + waiting;
    }

    private static String warmUp(WarmUp warmUp) {
        return Wording.duration(warmUp.rampNanos()) + " from " + Wording.exact(Unit.SHARE, warmUp.floor());
    }

    private static String drain(Drain drain) {
        return "cut after " + Wording.duration(drain.limitNanos())
                + (drain.keepClients() ? ", held clients are served until then" : "");
    }

    private static String retry(Retry retry) {
        String also = retry.also().isEmpty()
                ? ""
                : retry.also().stream().sorted().map(String::valueOf).collect(Collectors.joining(", ", ", also ", ""));
        return "at most " + retry.atMost() + ", budget " + Wording.exact(Unit.SHARE, retry.budget()) + ", bucket "
                + retry.bucket() + also;
    }
}
