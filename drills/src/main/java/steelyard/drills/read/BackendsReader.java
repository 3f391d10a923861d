package steelyard.drills.read;

import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Serves;

/** Reads the {@code backends:} of every pool of a stage; names are unique over all of them. */
final class BackendsReader {
    private static final int MOST = 10_000;
    private static final Quantity<Integer> TIMES = Numbers.from(1, MOST);
    private static final Quantity<Integer> TIER = Numbers.from(1, 2);
    private static final Quantity<String> STARTS = Words.of("a way to start", "up", "down");

    private final Problems problems;
    private final HostsReader hosts;
    private final ServesReader serves;
    private final Map<String, Place> taken = new HashMap<>();
    private int count;

    BackendsReader(Problems problems, HostsReader hosts, ServesReader serves) {
        this.problems = problems;
        this.hosts = hosts;
        this.serves = serves;
    }

    /** The backends of a pool; empty when there are none, which is noted. */
    OfPool read(Fields pool, String poolName) {
        ServesReader.Draft ofPool = serves.read(pool);
        List<Backend> backends = new ArrayList<>();
        Place firstWeight = null;
        boolean askedForServes = false;
        for (Node.Entry entry : pool.named("backends", "backend")) {
            Fields fields = Fields.open(entry.value(), Keys.BACKEND, problems);
            if (firstWeight == null && fields.has("weight")) {
                firstWeight = fields.keyPlace("weight");
            }
            ServesReader.Draft draft = serves.read(fields).over(ofPool);
            if (!draft.missing().isEmpty() && !askedForServes) {
                askedForServes = true;
                problems.add(
                        entry.place(),
                        "nothing says the " + Sentence.and(draft.missing()) + " of backend '" + entry.key() + "'",
                        "write serves: {workers: 8, time: 12ms} for it or for its pool");
            }
            // A tier that was refused where it stands is taken as the one that the pool expects.
            int harmless = fields.has("tier") && pool.has("standby") ? 2 : 1;
            add(entry, fields, harmless, draft.build(), backends);
        }
        if (backends.isEmpty()) {
            problems.add(
                    pool.has("backends") ? pool.valuePlace("backends") : pool.place(),
                    "pool '" + poolName + "' has no backend",
                    "write backends: {fulmar: {}}");
        }
        return new OfPool(backends, firstWeight);
    }

    private void add(Node.Entry entry, Fields fields, int harmlessTier, Serves backendServes, List<Backend> backends) {
        int weight = fields.read("weight", HostsReader.WEIGHT, 1);
        String hostName = fields.read("host", Names.NAME);
        Placed<String> host = hostName == null ? null : new Placed<>(fields.valuePlace("host"), hostName);
        boolean down = fields.read("starts", STARTS, "up").equals("down");
        int tier = fields.read("tier", TIER, harmlessTier);
        for (String name : names(entry, fields)) {
            if (enter(name, entry.place())) {
                String stand = hosts.hostOf(host, name, entry.place());
                backends.add(new Backend(name, entry.key(), weight, stand, down, tier, backendServes));
            }
        }
    }

    private List<String> names(Node.Entry entry, Fields fields) {
        if (!fields.has("times")) {
            return List.of(entry.key());
        }
        int times = fields.read("times", TIMES, 1);
        List<String> names = new ArrayList<>();
        enter(entry.key(), entry.place());
        for (int i = 1; i <= times; i++) {
            names.add(entry.key() + "-" + i);
        }
        return names;
    }

    /** Notes a name that is taken; answers whether the stage has room for one more backend. */
    private boolean enter(String name, Place place) {
        count++;
        if (count == MOST + 1) {
            problems.add(place, "more than " + MOST + " backends", "a stage holds at most " + MOST);
        }
        Place first = taken.putIfAbsent(name, place);
        if (first != null) {
            problems.add(
                    place, "backend '" + name + "' is there twice", "rename one; the first is on line " + first.line());
        }
        return count <= MOST;
    }

    /**
     * The backends of one pool.
     *
     * @param firstWeight where the first weight was written, or null
     */
    record OfPool(List<Backend> backends, @Nullable Place firstWeight) {
        boolean weightsDiffer() {
            return backends.stream().mapToInt(Backend::weight).distinct().count() > 1;
        }

        boolean noneWeighs() {
            return backends.stream().allMatch(backend -> backend.weight() == 0);
        }
    }
}
