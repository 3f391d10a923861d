package steelyard.harness.stage;

import java.util.Objects;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.BehaviourSettings;
import steelyard.backends.behave.BehaviourSettings.ProbeWork;
import steelyard.backends.behave.Cold;
import steelyard.backends.behave.Gauge;
import steelyard.backends.behave.LoadPage;
import steelyard.backends.behave.ServiceTime;
import steelyard.drills.model.LoadProbe;
import steelyard.drills.model.Serves;
import steelyard.drills.model.Trace;

/** How a backend of a drill serves, in the words of a behaviour. */
final class ServiceTerms {
    private static final int OK = 200;

    private ServiceTerms() {}

    /** With its service time, and how its load is read, or null where it is not: then it shows no load page. */
    static BehaviourSettings of(Serves serves, ServiceTime time, @Nullable LoadProbe load) {
        Serves.Cold cold = serves.cold();
        return new BehaviourSettings(
                serves.workers(),
                serves.queue(),
                time,
                serves.probesQueue() ? ProbeWork.QUEUED : ProbeWork.FREE,
                serves.probeLoss(),
                OK,
                serves.bodyBytes(),
                cold == null ? null : new Cold(cold.factor(), cold.decayNanos()),
                load == null ? null : page(serves, load));
    }

    private static LoadPage page(Serves serves, LoadProbe load) {
        return new LoadPage(
                load.costNanos(),
                serves.gauges().stream()
                        .map(each -> new Gauge(each.name(), each.base(), each.each()))
                        .toList());
    }

    static ServiceTime time(Serves.Time time) {
        return switch (time.law()) {
            case FIXED -> new ServiceTime.Fixed(time.firstNanos());
            case EXPONENTIAL -> new ServiceTime.Exponential(time.firstNanos());
            case LOGNORMAL -> new ServiceTime.Lognormal(time.firstNanos(), time.p99Nanos());
            case GAMMA -> new ServiceTime.Gamma(time.firstNanos(), time.shape());
            case TRACE -> trace(Objects.requireNonNull(time.trace()));
        };
    }

    private static ServiceTime trace(Trace trace) {
        ServiceTime.Order order = switch (trace.order()) {
            case SAMPLED -> ServiceTime.Order.SAMPLED;
            case REPLAYED -> ServiceTime.Order.REPLAYED;
        };
        return new ServiceTime.Trace(trace.nanos().toArray(), order);
    }
}
