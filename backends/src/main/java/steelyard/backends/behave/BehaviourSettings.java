package steelyard.backends.behave;

import java.util.Objects;
import org.jspecify.annotations.Nullable;

/**
 * How a healthy backend serves. Immutable.
 *
 * @param workers requests in service at once, 1 or above
 * @param queue requests that may wait for a worker, 0 or above; {@link Integer#MAX_VALUE} stands for no limit
 * @param time the work that a request asks for
 * @param probeWork whether a probe costs a worker
 * @param probeLoss chance of each probe to be read and never answered, 0..1
 * @param status the status of a good answer, 200..599
 * @param bodyBytes the size of its body, 0..16 MiB
 * @param cold how its caches fill again after a revive, or null if it has none worth mentioning
 * @param load its load page, or null if it has none
 */
public record BehaviourSettings(
        int workers,
        int queue,
        ServiceTime time,
        ProbeWork probeWork,
        double probeLoss,
        int status,
        int bodyBytes,
        @Nullable Cold cold,
        @Nullable LoadPage load) {

    private static final int MOST_BODY_BYTES = 16 << 20;
    private static final int USUAL_BODY_BYTES = 32;

    /** What answering a probe costs. */
    public enum ProbeWork {
        /** Nothing: probes are answered at once, past the queue. */
        FREE,
        /** As much as a request: a probe waits its turn and holds a worker. */
        QUEUED
    }

    public BehaviourSettings {
        Objects.requireNonNull(time);
        Objects.requireNonNull(probeWork);
        require(workers >= 1, "workers must be 1 or more", workers);
        require(queue >= 0, "queue must be 0 or more", queue);
        if (!(probeLoss >= 0 && probeLoss <= 1)) {
            throw new IllegalArgumentException("probe loss must be 0 to 1, but is " + probeLoss);
        }
        requireStatus(status);
        require(
                bodyBytes >= 0 && bodyBytes <= MOST_BODY_BYTES,
                "body must be 0 to " + MOST_BODY_BYTES + " bytes",
                bodyBytes);
    }

    /** No caches and no load page. */
    public BehaviourSettings(
            int workers,
            int queue,
            ServiceTime time,
            ProbeWork probeWork,
            double probeLoss,
            int status,
            int bodyBytes) {
        this(workers, queue, time, probeWork, probeLoss, status, bodyBytes, null, null);
    }

    /** Free probes, and a short answer with status 200. */
    public static BehaviourSettings of(int workers, int queue, ServiceTime time) {
        return new BehaviourSettings(workers, queue, time, ProbeWork.FREE, 0, 200, USUAL_BODY_BYTES);
    }

    public BehaviourSettings withProbeWork(ProbeWork set) {
        return new BehaviourSettings(workers, queue, time, set, probeLoss, status, bodyBytes, cold, load);
    }

    public BehaviourSettings withProbeLoss(double set) {
        return new BehaviourSettings(workers, queue, time, probeWork, set, status, bodyBytes, cold, load);
    }

    public BehaviourSettings withAnswer(int setStatus, int setBodyBytes) {
        return new BehaviourSettings(workers, queue, time, probeWork, probeLoss, setStatus, setBodyBytes, cold, load);
    }

    public BehaviourSettings withCold(@Nullable Cold set) {
        return new BehaviourSettings(workers, queue, time, probeWork, probeLoss, status, bodyBytes, set, load);
    }

    public BehaviourSettings withLoad(@Nullable LoadPage set) {
        return new BehaviourSettings(workers, queue, time, probeWork, probeLoss, status, bodyBytes, cold, set);
    }

    static void requireStatus(int status) {
        require(status >= 200 && status <= 599, "status must be 200 to 599", status);
    }

    private static void require(boolean holds, String rule, int value) {
        if (!holds) {
            throw new IllegalArgumentException(rule + ", but is " + value);
        }
    }
}
