package steelyard.balancer.live.control;

import com.fasterxml.jackson.core.JsonFactory;
import com.fasterxml.jackson.core.JsonGenerator;
import java.io.IOException;
import java.io.StringWriter;
import java.io.UncheckedIOException;
import java.util.Locale;
import steelyard.balancer.live.guard.BackendReadings;
import steelyard.balancer.live.guard.GuardedDecider;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.BalancerSettings;
import steelyard.balancer.settings.PoolSettings;

/** The state of one instant as JSON: every pool with its backends. Used by one thread. */
final class StatePage {
    private final BalancerSettings settings;
    private final GuardedDecider decider;
    private final BackendReadings readings;
    private final JsonFactory json = new JsonFactory();

    StatePage(BalancerSettings settings, GuardedDecider decider) {
        this.settings = settings;
        this.decider = decider;
        this.readings =
                new BackendReadings(settings.backends().size(), settings.pools().size());
    }

    /** The page; the lock is held only to copy the figures. */
    String page() {
        decider.read(readings);
        StringWriter text = new StringWriter();
        try (JsonGenerator to = json.createGenerator(text)) {
            write(to);
        } catch (IOException e) {
            throw new UncheckedIOException(e); // a string cannot be full
        }
        return text.append('\n').toString();
    }

    private void write(JsonGenerator to) throws IOException {
        to.writeStartObject();
        to.writeArrayFieldStart("pools");
        int backend = 0;
        for (int number = 0; number < settings.pools().size(); number++) {
            PoolSettings pool = settings.pools().get(number);
            to.writeStartObject();
            to.writeStringField("pool", pool.name());
            to.writeNumberField("waiting", readings.waiting(number));
            to.writeArrayFieldStart("backends");
            for (BackendSettings each : pool.backends()) {
                write(each.name(), backend++, to);
            }
            to.writeEndArray();
            to.writeEndObject();
        }
        to.writeEndArray();
        to.writeEndObject();
    }

    private void write(String name, int backend, JsonGenerator to) throws IOException {
        to.writeStartObject();
        to.writeStringField("backend", name);
        to.writeStringField("standing", readings.standing(backend).name().toLowerCase(Locale.ROOT));
        to.writeBooleanField("pickable", readings.pickable(backend));
        to.writeNumberField("in-flight", readings.inFlight(backend));
        to.writeNumberField("weight", readings.weight(backend));
        to.writeNumberField("headroom", readings.headroom(backend));
        to.writeNumberField("effective-weight", readings.effectiveWeight(backend));
        to.writeNumberField("entitled-share", readings.entitledShare(backend));
        to.writeEndObject();
    }
}
