package steelyard.harness.forecast;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import steelyard.harness.record.Cast;

/**
 * Backends whose slices are added up: one backend each, or, on a stage of more than {@value #MOST_ALONE}, all of a pool
 * in one zone, so that a forecast of thousands stays something that a person can look at.
 *
 * @param name the backend's, or {@code zone north}, {@code no zone}, {@code all}
 * @param pool the name of its pool
 * @param members numbers of backends
 */
record Group(String name, String pool, List<Integer> members) {
    static final int MOST_ALONE = 32;

    Group {
        members = List.copyOf(members);
    }

    /** In stage order; pools after each other. */
    static List<Group> of(Cast cast) {
        boolean alone = cast.backends().size() <= MOST_ALONE;
        boolean zones = cast.hosts().stream().anyMatch(host -> host.zone() != null);
        boolean pools = cast.pools().size() > 1;
        Map<String, Group> groups = new LinkedHashMap<>();
        for (int backend = 0; backend < cast.backends().size(); backend++) {
            String pool = cast.pools().get(cast.poolOf(backend)).name();
            String name = alone
                    ? cast.backends().get(backend).name()
                    : zones ? zone(cast.hosts().get(cast.hostOf(backend)).zone()) : "all";
            String full = alone || !pools ? name : name + " of " + pool;
            Group before = groups.get(full);
            List<Integer> members = new ArrayList<>(before == null ? List.of() : before.members);
            members.add(backend);
            groups.put(full, new Group(full, pool, members));
        }
        return List.copyOf(groups.values());
    }

    private static String zone(@Nullable String zone) {
        return zone == null ? "no zone" : "zone " + zone;
    }
}
