package steelyard.harness.report;

import java.io.IOException;
import java.util.HashMap;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import steelyard.harness.record.RunData.ForecastRow;

/** Puts the page together from its sections. */
final class Page {
    private Page() {}

    static String of(RunFiles run) throws IOException {
        Map<String, String> slots = new HashMap<>();
        slots.put("title", Html.text(run.run().drill()));
        slots.put("about", Html.prose(run.run().about()));
        slots.put("styles", Assets.styles());
        slots.put("scripts", Assets.scripts());
        slots.put("data", ChartData.json(run));
        slots.put("kicker", Html.text(VerdictSection.kicker(run)));
        slots.put("verdict", VerdictSection.html(run));
        slots.put(
                "expectations",
                VerdictSection.expectations(run) + method(run.run().forecast()));
        slots.put("cues", CueSection.cues(run));
        slots.put("changes", CueSection.changes(run));
        slots.put("stretches", StretchSection.html(run));
        slots.put("stretch-note", Html.text(StretchSection.note(run)));
        slots.put("last-resort", LastResort.html(run));
        slots.put("readings", Readings.html(run));
        slots.put("measures", VerdictSection.measures(run));
        slots.put("settings", SettingsSection.settings(run));
        slots.put("checks", SettingsSection.checks(run));
        slots.put("machine", SettingsSection.machine(run));
        slots.put("source", Html.text(run.run().source()));
        return Assets.page(slots);
    }

    private static String method(@Nullable ForecastRow forecast) {
        return forecast == null ? "" : ForecastSection.method(forecast);
    }
}
