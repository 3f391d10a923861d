package steelyard.drills.read;

import java.util.ArrayList;
import java.util.Collection;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.TreeSet;
import java.util.stream.Collectors;
import org.jspecify.annotations.Nullable;
import steelyard.drills.model.Backend;
import steelyard.drills.model.Host;
import steelyard.drills.model.Pool;
import steelyard.drills.model.Stage;
import steelyard.drills.model.Target;

/** Who is on the stage, by every name that a target may use. */
final class Roster {
    /** Backends by the name of one, of an entry with {@code times:}, of a host, a zone, a pool; each in stage order. */
    private final Map<Target.Kind, Map<String, List<String>>> named = new HashMap<>();

    private final Map<String, Integer> order = new HashMap<>();
    private final Map<String, Pool> pools = new HashMap<>();
    private final boolean known;

    /** With the stage, or null when it could not be read: then nothing can be said about names. */
    Roster(@Nullable Stage stage) {
        known = stage != null;
        for (Target.Kind kind : Target.Kind.values()) {
            named.put(kind, new LinkedHashMap<>());
        }
        if (stage != null) {
            Map<String, Host> hosts = stage.hosts().stream().collect(Collectors.toMap(Host::name, host -> host));
            stage.pools().forEach(pool -> pool.backends().forEach(backend -> enter(pool, backend, hosts)));
        }
    }

    private void enter(Pool pool, Backend backend, Map<String, Host> hosts) {
        order.put(backend.name(), order.size());
        pools.put(backend.name(), pool);
        put(Target.Kind.BACKENDS, backend.name(), backend.name());
        if (!backend.group().equals(backend.name())) {
            put(Target.Kind.BACKENDS, backend.group(), backend.name());
        }
        put(Target.Kind.HOST, backend.host(), backend.name());
        put(Target.Kind.POOL, pool.name(), backend.name());
        Host host = hosts.get(backend.host());
        String zone = host == null ? null : host.zone();
        if (zone != null) {
            put(Target.Kind.ZONE, zone, backend.name());
        }
    }

    private void put(Target.Kind kind, String name, String backend) {
        of(kind).computeIfAbsent(name, any -> new ArrayList<>()).add(backend);
    }

    private Map<String, List<String>> of(Target.Kind kind) {
        return named.getOrDefault(kind, Map.of());
    }

    /** Whether the stage could be read. */
    boolean known() {
        return known;
    }

    /** The pool that carries a backend of this roster. */
    Pool poolOf(String backend) {
        Pool pool = pools.get(backend);
        if (pool == null) {
            throw new IllegalArgumentException("no backend " + backend);
        }
        return pool;
    }

    /** The pools that carry a target's backends, in stage order. */
    Set<Pool> poolsOf(Target target) {
        Set<Pool> found = new LinkedHashSet<>();
        target.backends().forEach(backend -> found.add(poolOf(backend)));
        return found;
    }

    /** The target that a draft means; null when it names something that is not there, which is noted. */
    @Nullable
    Target resolve(TargetDraft draft, Problems problems) {
        if (!known) {
            return null;
        }
        Set<String> backends = new TreeSet<>((a, b) -> Integer.compare(place(a), place(b)));
        boolean all = true;
        for (Placed<String> name : draft.names()) {
            List<String> found = of(draft.kind()).get(name.value());
            if (found == null) {
                all = false;
                problems.add(name.place(), unknown(draft.kind(), name.value()), remedy(draft.kind(), name.value()));
            } else {
                backends.addAll(found);
            }
        }
        String text = draft.names().stream().map(Placed::value).distinct().collect(Collectors.joining(", "));
        return all ? new Target(draft.kind(), text, List.copyOf(backends)) : null;
    }

    private int place(String backend) {
        return order.getOrDefault(backend, -1);
    }

    private static String unknown(Target.Kind kind, String name) {
        return kind == Target.Kind.BACKENDS
                ? "there is no backend " + Quantity.quoted(name)
                : "no backend is in a " + kind.word() + " " + Quantity.quoted(name);
    }

    private String remedy(Target.Kind kind, String name) {
        for (Target.Kind other : List.of(Target.Kind.POOL, Target.Kind.HOST, Target.Kind.ZONE)) {
            if (kind == Target.Kind.BACKENDS && of(other).containsKey(name)) {
                return "write {" + other.word() + ": " + name + "} for all backends there";
            }
        }
        Collection<String> names = of(kind).keySet();
        String few = names.isEmpty()
                ? "none is listed"
                : "there is " + Sentence.and(names.stream().limit(8).toList());
        return NearWord.remedy(name, names, few);
    }
}
