package steelyard.drills.read;

import java.util.Set;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Drain;
import steelyard.drills.model.InFlight;
import steelyard.drills.model.Limits;
import steelyard.drills.model.Reserve;
import steelyard.drills.model.Retry;
import steelyard.drills.model.Timeouts;

/** Reads what a pool keeps to: limits of number, time and size, drains, retries, and what it falls back on. */
final class GuardsReader {
    private static final Quantity<Integer> MOST = Numbers.from(1, 1_000_000);
    private static final Quantity<Integer> WAITING = Numbers.from(0, 1_000_000);
    private static final Quantity<Integer> RETRIES = Numbers.from(1, 100);
    private static final Quantity<Integer> BUCKET = Numbers.from(1, 1_000_000);
    private static final Quantity<Integer> TARGET =
            Sizes.SIZE.that(n -> n >= 64 && n <= 1 << 20, "is out of range", "write a size from 64B to 1MiB");
    private static final Quantity<Integer> HEAD =
            Sizes.SIZE.that(n -> n >= 512 && n <= 1 << 20, "is out of range", "write a size from 512B to 1MiB");
    private static final Retry RETRY = new Retry(1, 1, 1, Set.of());

    private final Problems problems;

    GuardsReader(Problems problems) {
        this.problems = problems;
    }

    Reserve reserve(Fields pool) {
        return new Reserve(
                pool.read("last-resort", Shares.ABOVE_ZERO, 0.0), pool.read("standby", Shares.ABOVE_ZERO, 0.0));
    }

    @Nullable
    InFlight inFlight(Fields pool) {
        if (!pool.has("in-flight")) {
            return null;
        }
        Fields fields = pool.map("in-flight", Keys.IN_FLIGHT);
        int waiting = fields.read("waiting", WAITING, 0);
        if (waiting == 0 && fields.has("wait")) {
            problems.notice(
                    fields.keyPlace("wait"),
                    "wait plays no part, since nothing may wait",
                    "write waiting: 100, or leave it out");
        }
        return new InFlight(
                fields.need("most", MOST, 1),
                waiting,
                fields.read("wait", Durations.POSITIVE, InFlight.USUAL_WAIT_NANOS));
    }

    Drain drain(Fields pool) {
        Fields fields = pool.map("drain", Keys.DRAIN);
        boolean keeps = fields.read("keep-clients", Numbers.YES_OR_NO, false);
        if (keeps && !pool.has("affinity")) {
            problems.notice(
                    fields.keyPlace("keep-clients"),
                    "keep-clients plays no part, since no client is held",
                    "write affinity: cookie for the pool, or leave it out");
        }
        return new Drain(fields.read("limit", Durations.POSITIVE, Drain.USUAL.limitNanos()), keeps);
    }

    @Nullable
    Retry retry(Fields pool) {
        return HealthReader.read(pool, "retry", RETRY, () -> {
            Fields fields = pool.map("retry", Keys.RETRY);
            return new Retry(
                    fields.read("at-most", RETRIES, 1),
                    fields.read("budget", Shares.SHARE, 0.4),
                    fields.read("bucket", BUCKET, 10),
                    Set.copyOf(fields.values("also", Numbers.STATUS)));
        });
    }

    Timeouts timeouts(Fields pool) {
        Fields fields = pool.map("timeouts", Keys.TIMEOUTS);
        Timeouts usual = Timeouts.USUAL;
        return new Timeouts(
                fields.read("connect", Durations.POSITIVE, usual.connectNanos()),
                fields.read("first-byte", Durations.POSITIVE, usual.firstByteNanos()),
                fields.read("idle", Durations.POSITIVE, usual.idleNanos()),
                fields.read("head", Durations.POSITIVE, usual.headNanos()),
                fields.read("body", Durations.POSITIVE, usual.bodyNanos()));
    }

    Limits limits(Fields pool) {
        Fields fields = pool.map("limits", Keys.LIMITS);
        Limits usual = Limits.USUAL;
        Integer target = fields.read("target", TARGET);
        Integer head = fields.read("head", HEAD);
        if (target == null) {
            target = head == null ? usual.targetBytes() : Math.min(usual.targetBytes(), head - 1);
        }
        if (head == null) {
            head = Math.max(usual.headBytes(), 2 * target);
        }
        if (head <= target) {
            problems.add(
                    fields.valuePlace("head"),
                    "a head of that size cannot hold a target of " + target + "B",
                    "write more than that for the head");
            return usual;
        }
        return new Limits(target, head, fields.read("body", Sizes.SIZE, Limits.NONE));
    }
}
