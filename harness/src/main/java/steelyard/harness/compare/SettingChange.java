package steelyard.harness.compare;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;

/**
 * A setting that differs.
 *
 * @param setting its path in the drill, or what else a run was told
 * @param first as the first side has it; {@code -} where it has none
 * @param second the same of the second side
 */
public record SettingChange(String setting, String first, String second) {
    private static final String NONE = "-";

    /** All that differ as they are read: those of the drill in the order of its text, then how it was played. */
    static List<SettingChange> between(Runs first, Runs second) {
        List<SettingChange> changes = new ArrayList<>();
        FlatDrill one = new FlatDrill(first.first().source());
        FlatDrill two = new FlatDrill(second.first().source());
        add(changes, one.values(), two.values());
        changes.removeIf(each -> FlatDrill.sameAt(each.setting(), one, two));
        add(changes, played(first), played(second));
        return changes;
    }

    private static void add(List<SettingChange> changes, Map<String, String> one, Map<String, String> two) {
        Set<String> names = new LinkedHashSet<>(one.keySet());
        names.addAll(two.keySet());
        for (String name : names) {
            String before = one.getOrDefault(name, NONE);
            String after = two.getOrDefault(name, NONE);
            if (!before.equals(after)) {
                changes.add(new SettingChange(name, before, after));
            }
        }
    }

    private static Map<String, String> played(Runs runs) {
        Map<String, String> settings = new LinkedHashMap<>();
        settings.put("(stage)", runs.first().stage());
        settings.put("(backends)", runs.first().backendsRun());
        settings.put("(plays)", runs.words());
        settings.put("(seeds)", runs.seeds());
        settings.put("(cues by hand)", String.valueOf(runs.handCues()));
        settings.put("(version)", runs.first().version());
        return settings;
    }
}
