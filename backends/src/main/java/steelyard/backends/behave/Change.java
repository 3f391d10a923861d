package steelyard.backends.behave;

import java.util.Objects;
import org.jspecify.annotations.Nullable;

/**
 * One scripted change of a behaviour: a fault, or the end of faults. Immutable data, any thread.
 *
 * <p>A fault set again replaces the one of its kind. "New work" means requests that start service at or after the
 * change; what is in service keeps the finish that was planned for it.
 */
public sealed interface Change {

    /** What is changed, for switches that have to name every one. */
    enum Kind {
        SLOW,
        FAIL,
        HANG,
        REFUSE,
        KILL,
        REVIVE,
        FAIL_PROBE,
        FLAP_PROBE,
        LOAD,
        FILL,
        HEAL
    }

    Kind kind();

    /**
     * New work takes its demand times {@code factor} plus {@code plusNanos}.
     *
     * @param factor 0 or above
     * @param plusNanos 0 to a day
     * @param probes whether free probes are slowed too: each is answered late by what the fault would add to one drawn
     *     demand. Queued probes are work like any other and are slowed in either case
     */
    record Slow(double factor, long plusNanos, boolean probes) implements Change {
        public Slow {
            if (!(factor >= 0) || Double.isInfinite(factor)) {
                throw new IllegalArgumentException("slow needs a factor of 0 or more, but got " + factor);
            }
            if (plusNanos < 0 || plusNanos > ServiceTime.LONGEST_NANOS) {
                throw new IllegalArgumentException("slow can add 0 to a day, but got " + plusNanos + " ns");
            }
        }

        @Override
        public Kind kind() {
            return Kind.SLOW;
        }

        long slowed(long demandNanos) {
            double nanos = StrictMath.rint(demandNanos * factor) + plusNanos;
            return (long) Math.min(ServiceTime.LONGEST_NANOS, nanos);
        }
    }

    /** When a failing request is answered. */
    enum When {
        /** As soon as it has a worker, without doing the work. */
        AT_ONCE,
        /** After the work, which held its worker to the end. */
        AFTER_WORK
    }

    /**
     * A share of new work is answered with {@code status}. Whether a request is struck is drawn by request and attempt.
     *
     * @param share 0..1
     * @param status 400..599
     * @param probes whether the same share of probes is struck too
     */
    record Fail(double share, int status, When when, boolean probes) implements Change {
        public Fail {
            Objects.requireNonNull(when);
            if (!(share >= 0 && share <= 1)) {
                throw new IllegalArgumentException("fail needs a share of 0 to 1, but got " + share);
            }
            if (status < 400 || status > 599) {
                throw new IllegalArgumentException("fail needs a status of 400 to 599, but got " + status);
            }
        }

        @Override
        public Kind kind() {
            return Kind.FAIL;
        }
    }

    /**
     * Requests and probes are read and never answered, not even after a heal, and hold no worker. Requests in service
     * finish. Requests that wait when the hang begins have not started service, so they fall silent with it.
     */
    record Hang() implements Change {
        @Override
        public Kind kind() {
            return Kind.HANG;
        }
    }

    /** New connections are refused, open ones go on. */
    record Refuse() implements Change {
        @Override
        public Kind kind() {
            return Kind.REFUSE;
        }
    }

    /** The process dies: every connection is reset, its work is lost, new connections are refused. */
    record Kill() implements Change {
        @Override
        public Kind kind() {
            return Kind.KILL;
        }
    }

    /**
     * A killed backend starts again at its old address: empty, with cold caches, and without any fault, whether that was
     * set before the kill or since. A running one is left as it is.
     */
    record Revive() implements Change {
        @Override
        public Kind kind() {
            return Kind.REVIVE;
        }
    }

    /** Probes are answered 503; traffic is served as before. */
    record FailProbe() implements Change {
        @Override
        public Kind kind() {
            return Kind.FAIL_PROBE;
        }
    }

    /**
     * Counted from the change, probes fail in the first half of every period and succeed in the second.
     *
     * @param periodNanos 2 or above, at most a day
     */
    record FlapProbe(long periodNanos) implements Change {
        public FlapProbe {
            if (periodNanos < 2 || periodNanos > ServiceTime.LONGEST_NANOS) {
                throw new IllegalArgumentException(
                        "flap-probe needs a period between 2 ns and a day, but got " + periodNanos + " ns");
            }
        }

        @Override
        public Kind kind() {
            return Kind.FLAP_PROBE;
        }
    }

    /**
     * A gauge of the load page reads this value, whatever is served, until the fault ends. Set again, each gauge keeps the
     * value last set for it; the end is that of all of them.
     *
     * @param gauge any name that a gauge may have, cpu included; one that the backend has not is shown while this lasts
     * @param to 0..1
     */
    record Load(String gauge, double to) implements Change {
        public Load {
            Gauge.requireName(gauge);
            Gauge.requireShare("gauge " + gauge, to);
        }

        @Override
        public Kind kind() {
            return Kind.LOAD;
        }
    }

    /**
     * The disk is this full: the gauge {@link Gauge#DISK} of the load page reads it.
     *
     * @param to 0..1
     */
    record Fill(double to) implements Change {
        public Fill {
            Gauge.requireShare("fill", to);
        }

        @Override
        public Kind kind() {
            return Kind.FILL;
        }
    }

    /**
     * Ends one fault, or with null every fault; never a kill, which only {@link Revive} ends.
     *
     * @param fault the kind to end, one of SLOW, FAIL, HANG, REFUSE, FAIL_PROBE, FLAP_PROBE, LOAD, FILL, or
     *     null for all of them
     */
    record Heal(@Nullable Kind fault) implements Change {
        public Heal {
            if (fault == Kind.KILL || fault == Kind.REVIVE || fault == Kind.HEAL) {
                throw new IllegalArgumentException("heal cannot end " + fault);
            }
        }

        /** Ends every fault but a kill. */
        public static Heal all() {
            return new Heal(null);
        }

        @Override
        public Kind kind() {
            return Kind.HEAL;
        }
    }
}
