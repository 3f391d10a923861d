package steelyard.drills.read;

import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Host;

/** Reads {@code hosts:} and settles on which host a backend stands. */
final class HostsReader {
    static final Quantity<Integer> WEIGHT = Numbers.from(0, 1_000_000);

    private final Problems problems;
    private final boolean listed;
    private final Map<String, Host> hosts = new LinkedHashMap<>();
    private final Map<String, Place> unused = new LinkedHashMap<>();
    private final boolean weightsDiffer;
    private @Nullable Place firstWeight;

    HostsReader(Fields stage) {
        this.problems = stage.problems();
        this.listed = stage.node("hosts") instanceof Node.Entries;
        for (Node.Entry entry : stage.named("hosts", "host")) {
            Fields fields = Fields.open(entry.value(), Keys.HOST, problems);
            if (fields.has("weight") && firstWeight == null) {
                firstWeight = fields.keyPlace("weight");
            }
            String zone = fields.read("zone", Names.NAME);
            hosts.put(entry.key(), new Host(entry.key(), fields.read("weight", WEIGHT, 1), zone));
            unused.put(entry.key(), entry.place());
        }
        weightsDiffer =
                hosts.values().stream().mapToInt(Host::weight).distinct().count() > 1;
    }

    /** The host of a backend: the one that it names, else one of its own. */
    String hostOf(@Nullable Placed<String> named, String backend, Place place) {
        if (named == null) {
            if (listed && hosts.containsKey(backend)) {
                problems.add(
                        place,
                        "backend '" + backend + "' has the name of a host",
                        "rename one, or say host: " + backend);
            }
            hosts.putIfAbsent(backend, new Host(backend, 1, null));
            return backend;
        }
        String host = named.value();
        unused.remove(host);
        if (!hosts.containsKey(host)) {
            if (listed) {
                problems.add(
                        named.place(),
                        "there is no host " + Quantity.quoted(host),
                        NearWord.remedy(host, hosts.keySet(), "list it under hosts"));
            }
            hosts.put(host, new Host(host, 1, null));
        }
        return host;
    }

    /** Every host, and notices on those that carry nothing. */
    List<Host> finish() {
        for (Map.Entry<String, Place> entry : unused.entrySet()) {
            problems.notice(
                    entry.getValue(),
                    "no backend stands on host '" + entry.getKey() + "'",
                    "drop it, or place one there");
        }
        return List.copyOf(hosts.values());
    }

    /** Where the first host weight was written, or null. */
    @Nullable
    Place firstWeight() {
        return firstWeight;
    }

    /** Whether two hosts of the list carry different weights. */
    boolean weightsDiffer() {
        return weightsDiffer;
    }
}
