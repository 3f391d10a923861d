package steelyard.harness.record;

import com.fasterxml.jackson.databind.JsonNode;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;

/**
 * A run as its folder tells it; also that of a play that was killed, whose verdict is null and whose tables end early.
 * Times are seconds of play time. Immutable but for the arrays, which a reader leaves alone.
 *
 * @param drill title of the drill
 * @param ended {@code complete}, {@code interrupted}, or {@code playing} for a play that was killed
 * @param standings of a forecast: changes over plays, each at the median of its instants
 * @param readings when weights began to go by load, ceased to for want of readings, and did again; in order of time
 * @param forecast what only a forecast has; null for a rehearsal
 * @param machine what {@code machine.json} says, in its order; empty when it is not there
 */
public record RunData(
        String drill,
        String about,
        String stage,
        String backendsRun,
        long seed,
        double lasts,
        String ended,
        String version,
        List<HostRow> hosts,
        List<PoolRow> pools,
        List<BackendRow> backends,
        @Nullable VerdictRow verdict,
        List<FindingRow> expectations,
        List<FindingRow> measures,
        List<SelfCheck> checks,
        String source,
        Map<String, String> machine,
        Slices slices,
        List<StandingRow> standings,
        List<CueRow> cues,
        List<ReadingRow> readings,
        @Nullable ForecastRow forecast) {

    /** The columns of {@code slices.csv} that each backend has, behind its name and a colon. */
    public static final List<String> BACKEND_COLUMNS =
            List.of("picked", "in-flight", "standing", "weight", "entitled", "utilisation", "waiting");

    /**
     * Reads a run.
     *
     * @throws FolderRefused when there is no run, or one that cannot be understood
     */
    public static RunData read(RunFolder folder) throws FolderRefused {
        return new RunReader(folder).read();
    }

    /** How many cues a person sent while it was played. */
    public long handCues() {
        return cues.stream().filter(each -> each.by().equals("hand")).count();
    }

    /** A host of the cast. */
    public record HostRow(String name, int weight, @Nullable String zone) {}

    /** A pool of the cast; settings in words, in order. */
    public record PoolRow(String name, String method, String count, String weights, Map<String, String> settings) {
        /** Whether its weights go by what load probes read. */
        public boolean weighsByLoad() {
            return weights.equals("load");
        }

        /** Whether what is picked for are connections, whose octets are passed on as they come. */
        public boolean passesOctets() {
            return settings.getOrDefault("front", "http").startsWith("tcp");
        }
    }

    /** A backend of the cast, in stage order. */
    public record BackendRow(String name, String pool, String host, int weight) {}

    /** The verdict in one line. */
    public record VerdictRow(boolean met, boolean fit, String text) {}

    /**
     * An expectation or a measure. Durations in seconds, shares as fractions.
     *
     * @param value NaN where it has none
     * @param least NaN without a lower bound
     * @param most NaN without an upper bound
     * @param reached false when the play was interrupted before the outcome could be known
     * @param held of a forecast: in how many plays the bound held; null without a bound
     * @param spread of a forecast: where the value, which is then the median, lies over plays
     */
    public record FindingRow(
            String measure,
            @Nullable String of,
            String text,
            @Nullable String bound,
            String measured,
            double value,
            double least,
            double most,
            String unit,
            @Nullable String margin,
            boolean met,
            boolean reached,
            @Nullable String why,
            @Nullable HeldRow held,
            @Nullable SpreadRow spread) {

        static FindingRow of(JsonNode node) {
            return new FindingRow(
                    node.path("measure").asText(),
                    text(node, "of"),
                    node.path("text").asText(),
                    text(node, "bound"),
                    node.path("measured").asText(),
                    node.path("value").asDouble(Double.NaN),
                    node.path("least").asDouble(Double.NaN),
                    node.path("most").asDouble(Double.NaN),
                    node.path("unit").asText(),
                    text(node, "margin"),
                    !node.path("met").isNull() && node.path("met").asBoolean(true),
                    !node.path("met").isNull(),
                    text(node, "why"),
                    HeldRow.of(node.path("held")),
                    SpreadRow.of(node.path("spread")));
        }

        private static @Nullable String text(JsonNode node, String key) {
            return node.path(key).isTextual() ? node.path(key).asText() : null;
        }
    }

    /**
     * What a forecast is of.
     *
     * @param plays that were played
     * @param wanted that were asked for
     * @param hold the share of plays in which an expectation must hold
     * @param quantiles how quantiles over plays are taken, in words
     * @param interval how the interval of a share of plays is taken, in words
     * @param bandPlays the plays that slices and changes of standing are of: the first so many
     * @param rows what stands in the columns of slices, in order: a backend, or a group of backends of a pool
     */
    public record ForecastRow(
            int plays,
            int wanted,
            double hold,
            String quantiles,
            String interval,
            int bandPlays,
            List<GroupRow> rows) {}

    /** What stands in the columns of a forecast's slices. */
    public record GroupRow(String name, String pool, int backends) {}

    /** In how many plays a bound held, with the interval of the share, from 0 to 1. */
    public record HeldRow(int plays, double share, double low, double high) {
        static @Nullable HeldRow of(JsonNode node) {
            return node.isObject()
                    ? new HeldRow(
                            node.path("plays").asInt(),
                            node.path("share").asDouble(),
                            node.path("low").asDouble(),
                            node.path("high").asDouble())
                    : null;
        }
    }

    /** Where a figure lies over plays: 5 and 95 %, 2.5 and 97.5 % quantiles, ends. NaN where no play has a value. */
    public record SpreadRow(
            int undefined, double low90, double high90, double low95, double high95, double least, double most) {
        static @Nullable SpreadRow of(JsonNode node) {
            return node.isObject()
                    ? new SpreadRow(
                            node.path("undefined").asInt(),
                            node.path("low90").asDouble(Double.NaN),
                            node.path("high90").asDouble(Double.NaN),
                            node.path("low95").asDouble(Double.NaN),
                            node.path("high95").asDouble(Double.NaN),
                            node.path("least").asDouble(Double.NaN),
                            node.path("most").asDouble(Double.NaN))
                    : null;
        }
    }

    /**
     * A change of standing; in a forecast one that plays have in common.
     *
     * @param at in a forecast the median of its instants
     * @param low their 5 % quantile; the instant itself in a rehearsal
     * @param high their 95 % quantile
     * @param share of the plays that had it, from 0 to 1
     */
    public record StandingRow(
            double at,
            String backend,
            String from,
            String to,
            String cause,
            boolean pickable,
            double low,
            double high,
            double share) {
        /** That of one play. */
        public StandingRow(double at, String backend, String from, String to, String cause, boolean pickable) {
            this(at, backend, from, to, cause, pickable, at, at, 1);
        }
    }

    /**
     * A change of what a weight goes by.
     *
     * @param reading its number
     * @param headroom what the set weight is multiplied by from then on
     * @param fresh whether it goes by readings again, else by what was set
     */
    public record ReadingRow(double at, String backend, long reading, double headroom, boolean fresh) {}

    /** A cue that was applied; {@code by} is {@code drill}, {@code hand} or {@code end}. */
    public record CueRow(double due, double at, String cue, String action, String by) {}
}
