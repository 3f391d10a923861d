package steelyard.backends.behave;

import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.Change.Fail;
import steelyard.backends.behave.Change.When;
import steelyard.backends.behave.Places.Task;

/** How long each piece of work takes when it starts, and which of it a fault strikes. */
final class Work {

    /** Sets the draws for lost probes apart from those for faults, whose second key is the bare number below 0. */
    private static final long OF_LOSS = 1L << 32;

    private final BehaviourSettings settings;
    private final Chance chance;
    private final Faults faults;
    private final Places places;
    private final int probeKey;

    Work(int backend, BehaviourSettings settings, Chance chance, Faults faults, Places places) {
        this.settings = settings;
        this.chance = chance;
        this.faults = faults;
        this.places = places;
        // Attempts are counted from 1 (0: not told), so a key below 0 keeps the draws of probes apart from those of
        // requests.
        this.probeKey = -1 - backend;
    }

    /** Whether chance loses a probe: by the backend's number and the probe's. */
    boolean losesProbe(long probe) {
        return settings.probeLoss() > 0 && chance.unit(Stream.FAULT, probe, OF_LOSS - probeKey) < settings.probeLoss();
    }

    /** The fault that answers what is at this place if it starts now, or null. Readings are spared. */
    @Nullable
    Fail failing(int place) {
        Task task = places.task[place];
        return task == Task.READING
                ? null
                : faults.failing(chance, task == Task.PROBE, places.number[place], drawKey(place));
    }

    /** How long it holds a worker if it starts at this instant. */
    long nanos(int place, @Nullable Fail fail, long atNanos) {
        if (fail != null && fail.when() == When.AT_ONCE) {
            return 0;
        }
        return faults.slowed(
                places.task[place] == Task.READING
                        ? readingNanos()
                        : cooled(demandNanos(place) + places.extraNanos[place], atNanos));
    }

    /** How late a probe is that holds no worker: by what a fault that slows such probes adds to one demand. */
    long freeProbeNanos(int place) {
        if (!faults.slowsFreeProbes()) {
            return 0;
        }
        long demandNanos = demandNanos(place);
        return Math.max(0, faults.slowed(demandNanos) - demandNanos);
    }

    /** What one reading of the load page costs. */
    long readingNanos() {
        LoadPage page = settings.load();
        return page == null ? 0 : page.costNanos();
    }

    private long cooled(long nanos, long atNanos) {
        Cold cold = settings.cold();
        return cold == null || !faults.revived() ? nanos : cold.slowed(nanos, atNanos - faults.revivedNanos());
    }

    private long demandNanos(int place) {
        return settings.time().demandNanos(chance, places.number[place], drawKey(place));
    }

    private int drawKey(int place) {
        return places.task[place] == Task.PROBE ? probeKey : places.attempt[place];
    }
}
