package steelyard.browser;

import com.fasterxml.jackson.databind.ObjectMapper;
import com.fasterxml.jackson.databind.node.ArrayNode;
import com.fasterxml.jackson.databind.node.ObjectNode;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Random;

/**
 * Writes a run folder as a play would leave it, from a small made-up account: who stands where when, and how much is
 * asked. Figures are drawn from a fixed seed and hang together (shares follow weights, failures follow deaths).
 */
final class InventedRun {
    private static final List<String> CAUSES = List.of(
            "refused",
            "reset",
            "timed-out",
            "no-backend",
            "bad-gateway",
            "gateway-timeout",
            "backend-error",
            "cut",
            "gave-up");
    private static final double WARM_UP = 5;

    private final Random random = new Random(7);
    private final ObjectMapper json = new ObjectMapper();
    private final String title;
    private final double lasts;
    private double played;
    private String ended = "complete";
    private boolean retries = true;
    private String source = "drill: invented\nlasts: 60s\n";
    private final List<Member> members = new ArrayList<>();
    private final List<Cue> cues = new ArrayList<>();
    private final List<Expected> expectations = new ArrayList<>();
    private final List<String> readings = new ArrayList<>();
    private String loaded = "";
    private String queued = "";
    private String connected = "";

    InventedRun(String title, double lasts) {
        this.title = title;
        this.lasts = lasts;
        this.played = lasts;
    }

    /** A backend of a pool that gets so many requests a second. */
    Member backend(String name, String pool, int weight, double poolRate) {
        Member member = new Member(name, pool, weight, poolRate);
        members.add(member);
        return member;
    }

    InventedRun cue(double at, String name, String action) {
        cues.add(new Cue(at, name, action));
        return this;
    }

    InventedRun expect(String text, String bound, String measured, String margin, boolean met, String why) {
        expectations.add(new Expected(text, bound, measured, margin, met, why));
        return this;
    }

    /** The pool weighs by load, read each second. */
    InventedRun byLoad(String pool) {
        loaded = pool;
        return this;
    }

    /** Requests of the pool may wait in the balancer. */
    InventedRun queues(String pool) {
        queued = pool;
        return this;
    }

    /** Connections to the pool are passed on. */
    InventedRun connections(String pool) {
        connected = pool;
        return this;
    }

    InventedRun unread(String backend, double from, double to) {
        readings.add(fixed(from, 6) + "," + backend + ",9,1.000,false\n");
        readings.add(fixed(to, 6) + "," + backend + ",14,0.400,true\n");
        return this;
    }

    InventedRun interruptedAt(double second) {
        played = second;
        ended = "interrupted";
        return this;
    }

    InventedRun withoutRetries() {
        retries = false;
        return this;
    }

    InventedRun source(String text) {
        source = text;
        return this;
    }

    /** Writes all files that the report reads. */
    Path write(Path folder) throws IOException {
        Files.createDirectories(folder);
        Files.writeString(
                folder.resolve("run.json"),
                json.writerWithDefaultPrettyPrinter().writeValueAsString(run()));
        Files.writeString(
                folder.resolve("machine.json"),
                "{\"started\": \"2020-02-02T02:02:02Z\", \"processors\": 2, \"memory\": 4294967296, \"os\": \"Linux 6.1\","
                        + " \"java\": \"17.0.15\", \"transport\": \"epoll\", \"engine\": null}");
        Files.writeString(folder.resolve("slices.csv"), slices());
        Files.writeString(folder.resolve("standing.csv"), standing());
        Files.writeString(folder.resolve("cues.csv"), cueRows());
        if (!loaded.isEmpty()) {
            StringBuilder rows = new StringBuilder("at,backend,reading,headroom,fresh\n");
            members.stream()
                    .filter(this::byLoad)
                    .forEach(each -> rows.append("0.6,").append(each.name).append(",0,0.500,true\n"));
            Files.writeString(folder.resolve("readings.csv"), rows + String.join("", readings));
        }
        return folder;
    }

    private ObjectNode run() {
        ObjectNode run = json.createObjectNode();
        run.put("format", 1).put("drill", title);
        run.put(
                "about",
                "Seat search of Skerry Ferries. One of the backends dies and comes back while people book. Watch how"
                        + " fast the others take over, and how gently it returns.");
        run.put("stage", "live").put("backends", "embedded").put("seed", 7).put("lasts", lasts);
        run.put("ended", ended).put("source", source);
        run.putObject("versions").put("steelyard", "0.1.0");
        cast(run.putObject("cast"));
        boolean complete = ended.equals("complete");
        verdict(run, complete);
        ArrayNode expected = run.putArray("expectations");
        ArrayNode measures = run.putArray("measures");
        ArrayNode checks = run.putArray("checks");
        if (complete) {
            expectations.forEach(each -> each.write(expected.addObject()));
            measure(measures, "failed", "0.31 %");
            measure(measures, "longest-outage", "0 s");
            measure(measures, "latency 99 %", "86.2 ms");
            measure(measures, "peak-in-flight", "41");
            check(checks, "lateness of the generator", "99 % within 0.4 ms (limit 5 ms)");
            check(checks, "connection cap", "never hit; 212 of 4,096 at most");
            check(checks, "each request ended once", "54,012 offered = 53,990 good + 22 failed");
            check(checks, "attempts counted twice agree", "54,377 in the balancer, 54,377 in the backends");
        }
        return run;
    }

    private void cast(ObjectNode cast) {
        cast.putArray("hosts")
                .addObject()
                .put("name", "north-quay")
                .put("weight", 10)
                .put("zone", "north");
        ArrayNode pools = cast.putArray("pools");
        for (String pool : pools()) {
            ObjectNode node = pools.addObject();
            node.put("name", pool).put("method", "weighted-round-robin");
            node.put("count", pool.equals(connected) ? "connections" : "requests");
            node.put("weights", pool.equals(loaded) ? "load" : "backend");
            node.putObject("settings")
                    .put("front", pool.equals(connected) ? "tcp" : "http")
                    .put("probe", "http /afloat every 1 s within 400 ms, 3 misses, 2 passes")
                    .put("warm-up", "5 s from 10 %")
                    .put("retry", "at most 1, budget 40 %");
        }
        ArrayNode backends = cast.putArray("backends");
        for (Member member : members) {
            backends.addObject()
                    .put("name", member.name)
                    .put("pool", member.pool)
                    .put("host", "north-quay")
                    .put("weight", member.weight);
        }
    }

    private void verdict(ObjectNode run, boolean complete) {
        if (!complete) {
            run.putNull("verdict");
            return;
        }
        List<Expected> broken = expectations.stream().filter(each -> !each.met).toList();
        String text = broken.isEmpty()
                ? "Met: all " + expectations.size() + " expectations held; tightest: share of fulmar, 1.2 points inside"
                : "Not met: " + broken.size() + " of " + expectations.size() + " expectations did not hold; worst: "
                        + broken.get(0).text + ", " + broken.get(0).measured + " where " + broken.get(0).bound
                        + " was asked";
        run.putObject("verdict").put("met", broken.isEmpty()).put("fit", true).put("text", text);
    }

    private static void measure(ArrayNode measures, String text, String measured) {
        measures.addObject()
                .put("measure", text)
                .putNull("of")
                .put("text", text)
                .put("measured", measured)
                .putNull("why");
    }

    private static void check(ArrayNode checks, String name, String text) {
        checks.addObject().put("check", name).put("ok", true).put("text", text);
    }

    private List<String> pools() {
        return members.stream().map(member -> member.pool).distinct().toList();
    }

    private String slices() {
        StringBuilder out = new StringBuilder("slice,from,offered,ok,failed,");
        out.append(String.join(",", CAUSES)).append(",p50_ms,p95_ms,p99_ms,worst_ms,retries");
        for (Member member : members) {
            for (String column :
                    List.of("picked", "in-flight", "standing", "weight", "entitled", "utilisation", "waiting")) {
                out.append(',').append(member.name).append(':').append(column);
            }
        }
        if (!queued.isEmpty()) {
            out.append(",pool ").append(queued).append(":waiting");
        }
        members.stream()
                .filter(this::byLoad)
                .forEach(each -> out.append(',').append(each.name).append(":headroom"));
        out.append('\n');
        for (int slice = 0; slice < Math.round(played * 10); slice++) {
            out.append(new Slice(slice).row()).append('\n');
        }
        return out.toString();
    }

    private String standing() {
        record Row(double at, String text) {}
        List<Row> rows = new ArrayList<>();
        for (Member member : members) {
            String from = member.first;
            for (Change change : member.changes) {
                if (change.at < played) {
                    boolean pickable = change.to.equals("up") || change.to.equals("warming");
                    rows.add(new Row(
                            change.at,
                            fixed(change.at, 6) + "," + member.name + "," + from + "," + change.to + "," + change.cause
                                    + "," + pickable));
                }
                from = change.to;
            }
        }
        rows.sort((a, b) -> Double.compare(a.at, b.at));
        StringBuilder out = new StringBuilder("at,backend,from,to,cause,pickable\n");
        rows.forEach(row -> out.append(row.text).append('\n'));
        return out.toString();
    }

    private String cueRows() {
        StringBuilder out = new StringBuilder("due,at,cue,action,by\n");
        for (Cue cue : cues) {
            if (cue.at < played) {
                out.append(fixed(cue.at, 6)).append(',').append(fixed(cue.at + 0.0004, 6));
                out.append(",\"").append(cue.name.replace("\"", "\"\"")).append("\",\"");
                out.append(cue.action).append("\",drill\n");
            }
        }
        return out.toString();
    }

    private static String fixed(double value, int decimals) {
        return String.format(Locale.ROOT, "%." + decimals + "f", value);
    }

    /** One row of slices.csv. */
    private final class Slice {
        private final int number;
        private final double at;
        private final int[] failed = new int[CAUSES.size()];
        private final int[] picked = new int[members.size()];
        private int offered;
        private int retried;
        private double load;

        Slice(int number) {
            this.number = number;
            this.at = number / 10.0;
            pools().forEach(this::serve);
        }

        private void serve(String pool) {
            List<Member> own =
                    members.stream().filter(member -> member.pool.equals(pool)).toList();
            int due = poisson(own.get(0).poolRate / 10);
            offered += due;
            double sum = own.stream().mapToDouble(member -> member.weightAt(at)).sum();
            if (sum == 0) {
                failed[CAUSES.indexOf("no-backend")] += due;
                return;
            }
            for (Member member : own) {
                double part = member.weightAt(at) / sum;
                int share = (int) Math.round(due * part + random.nextGaussian() * 0.7);
                share = part == 0 ? 0 : Math.max(share, 0);
                picked[members.indexOf(member)] += share;
                if (member.deadAt(at)) {
                    lose(own, member, share);
                }
                load = Math.max(load, due * part * 10 * 0.012 / 8 * own.size() / 3);
            }
        }

        private void lose(List<Member> own, Member dead, int share) {
            String cause = CAUSES.get((int) (dead.causes.length == 0 ? 0 : dead.causes[number % dead.causes.length]));
            if (!retries) {
                failed[CAUSES.indexOf(cause)] += share;
                return;
            }
            retried += share;
            for (int again = 0; again < share; again++) {
                Member other = own.get((own.indexOf(dead) + 1 + again % (own.size() - 1)) % own.size());
                picked[members.indexOf(other)]++;
            }
        }

        String row() {
            int lost = 0;
            for (int each : failed) {
                lost += each;
            }
            int good = Math.max(offered - lost, 0);
            offered = good + lost;
            StringBuilder row = new StringBuilder();
            row.append(number).append(',').append(fixed(at, 6)).append(',').append(offered);
            row.append(',').append(good).append(',').append(lost);
            for (int each : failed) {
                row.append(',').append(each);
            }
            latencies(row, good);
            row.append(',').append(retried);
            for (Member member : members) {
                ofBackend(row, member);
            }
            if (!queued.isEmpty()) {
                row.append(',').append(Math.max(0, (int) (30 * Math.sin(at / 5) + random.nextInt(8))));
            }
            members.stream()
                    .filter(InventedRun.this::byLoad)
                    .forEach(each -> row.append(',').append(fixed(each.headroom, 4)));
            return row.toString();
        }

        private void latencies(StringBuilder row, int good) {
            if (good == 0) {
                row.append(",,,,");
                return;
            }
            double slower = 1 / Math.max(1 - load, 0.15);
            double[] scale = {12 * Math.pow(slower, 0.2), 38 * Math.pow(slower, 0.5), 62 * Math.pow(slower, 0.6), 0};
            double last = 0;
            for (double each : scale) {
                last = Math.max(last * (1 + random.nextDouble() / 2), each * Math.exp(random.nextGaussian() * 0.12));
                row.append(',').append(fixed(last, 3));
            }
        }

        private void ofBackend(StringBuilder row, Member member) {
            double sum = members.stream()
                    .filter(other -> other.pool.equals(member.pool))
                    .mapToDouble(other -> other.weightAt(at))
                    .sum();
            double weight = member.weightAt(at);
            double busy = member.deadAt(at)
                    ? 0
                    : Math.min(
                            1,
                            member.slower
                                    * picked[members.indexOf(member)]
                                    * 10
                                    * 0.0163
                                    / 8
                                    * (0.9 + random.nextDouble() / 5));
            if (byLoad(member)) {
                member.read(number, busy);
            }
            int inFlight = (int) Math.round(busy * 8 + (busy > 0.7 ? random.nextInt(7) : 0));
            row.append(',').append(picked[members.indexOf(member)]);
            row.append(',').append(inFlight);
            row.append(',').append(member.standingAt(at + 0.1));
            row.append(',').append(fixed(weight, 6));
            row.append(',').append(fixed(sum == 0 ? 0 : weight / sum, 6));
            row.append(',').append(fixed(busy, 6));
            row.append(',').append(Math.max(0, inFlight - 8));
        }
    }

    private boolean byLoad(Member member) {
        return member.pool.equals(loaded);
    }

    private int poisson(double mean) {
        double limit = Math.exp(-mean);
        double product = random.nextDouble();
        int count = 0;
        while (product > limit) {
            product *= random.nextDouble();
            count++;
        }
        return count;
    }

    /** A backend, when it was dead, and what the balancer came to think of it. */
    static final class Member {
        private final String name;
        private final String pool;
        private final int weight;
        private final double poolRate;
        private final List<Change> changes = new ArrayList<>();
        private final List<double[]> deaths = new ArrayList<>();
        private double[] causes = {};
        private String first = "up";
        private double reweighedAt = Double.MAX_VALUE;
        private int reweighed;
        private double slower = 1;
        private double headroom = 1;
        private double busySum;

        Member(String name, String pool, int weight, double poolRate) {
            this.name = name;
            this.pool = pool;
            this.weight = weight;
            this.poolRate = poolRate;
        }

        Member stands(double at, String to, String cause) {
            changes.add(new Change(at, to, cause));
            return this;
        }

        /** Its work takes that many times what it does for others. */
        Member slower(double times) {
            slower = times;
            return this;
        }

        /** Once a second the headroom becomes what the last second's utilisation left. */
        private void read(int slice, double busy) {
            busySum += busy;
            if (slice % 10 == name.length() % 10) {
                headroom = Math.max(0.1, 1 - busySum / 10);
                busySum = 0;
            }
        }

        Member dead(double from, double to) {
            deaths.add(new double[] {from, to});
            return this;
        }

        /** While it is dead, its requests fail for these causes in turn (by their place in the file). */
        Member failing(double... places) {
            causes = places;
            return this;
        }

        Member reweigh(double at, int to) {
            reweighedAt = at;
            reweighed = to;
            return this;
        }

        /** Dies, is found out, comes back, is found alive, and is full again. */
        Member losesAndReturns(double death, double back) {
            return dead(death, back)
                    .stands(death + 2.612, "down", "misses")
                    .stands(back + 1.6, "warming", "passes")
                    .stands(back + 1.6 + WARM_UP, "up", "ramped");
        }

        private boolean deadAt(double at) {
            return deaths.stream().anyMatch(death -> at >= death[0] && at < death[1]);
        }

        private String standingAt(double at) {
            String word = first;
            for (Change change : changes) {
                word = change.at <= at ? change.to : word;
            }
            return word;
        }

        private double weightAt(double at) {
            double full = at >= reweighedAt ? reweighed : weight;
            return switch (standingAt(at)) {
                case "up" -> full * headroom;
                case "warming" -> full * Math.max(0.1, (at - since(at)) / WARM_UP);
                default -> 0;
            };
        }

        private double since(double at) {
            return changes.stream()
                    .mapToDouble(Change::at)
                    .filter(each -> each <= at)
                    .max()
                    .orElse(0);
        }
    }

    private record Change(double at, String to, String cause) {}

    private record Cue(double at, String name, String action) {}

    private record Expected(String text, String bound, String measured, String margin, boolean met, String why) {
        void write(ObjectNode node) {
            String[] parts = text.split(" of |, ");
            boolean targeted = text.contains(" of ");
            node.put("measure", parts[0]).put("of", targeted ? parts[1] : null).put("bound", bound);
            node.put("text", text);
            node.put("measured", measured).put("margin", margin).put("met", met);
            node.put("why", why.isEmpty() ? null : why);
            boolean above = !met && why.isEmpty();
            node.put("value", above ? 0.172 : 0.0)
                    .putNull("least")
                    .put("most", 0.003)
                    .put("unit", "share");
        }
    }
}
