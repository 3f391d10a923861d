package steelyard.harness.record;

import org.jspecify.annotations.Nullable;
import steelyard.balancer.core.standing.Transition;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;

/**
 * Writes a run while it is played: flushed each second of play time, so that a killed run leaves what it had. A failure
 * to write never stops the play: {@link #trouble} says it once, and {@link #finish} marks the run unfit.
 */
public final class Recorder implements PlayListener {
    private static final long FLUSH_NANOS = 1_000_000_000L;

    private final RunFolder folder;
    private final RunHead head;
    private final Cast cast;
    private final Trouble trouble = new Trouble();
    private final RowFile slices;
    private final RowFile standing;
    private final RowFile cues;
    private final @Nullable RowFile readings;
    private final Guidance guidance;
    private final LatencyLog latency;
    private final SliceBook book;
    private long flushedNanos;
    private boolean complete;
    private int handCues;

    /** Writes {@code run.json} and {@code machine.json} and opens the rest. Nothing here throws on a full disk. */
    public Recorder(RunFolder folder, RunHead head, Cast cast, Machine machine) {
        this.folder = folder;
        this.head = head;
        this.cast = cast;
        replace(RunFolder.RUN, RunJson.run(head, cast, "playing", null));
        replace(RunFolder.MACHINE, RunJson.machine(machine));
        slices = new RowFile(folder.file(RunFolder.SLICES), trouble);
        standing = new RowFile(folder.file(RunFolder.STANDING), trouble);
        cues = new RowFile(folder.file(RunFolder.CUES), trouble);
        latency = new LatencyLog(folder.file(RunFolder.LATENCY), cast, trouble);
        standing.row().append("at,backend,from,to,cause,pickable");
        standing.write();
        cues.row().append("due,at,cue,action,by");
        cues.write();
        guidance = new Guidance(cast.backends().size());
        readings = cast.loaded().length == 0 ? null : new RowFile(folder.file(RunFolder.READINGS), trouble);
        if (readings != null) {
            readings.row().append("at,backend,reading,headroom,fresh");
            readings.write();
        }
        SliceTable table = new SliceTable(slices, cast);
        book = new SliceBook(
                cast,
                slice -> {
                    table.write(slice);
                    latency.add(slice);
                },
                true);
        flush();
    }

    @Override
    public void requestDue(long atNanos, long request, int traffic, int kind, int client) {
        book.requestDue(atNanos, request, traffic, kind, client);
    }

    @Override
    public void requestEnded(
            long atNanos, long request, long dueNanos, int traffic, int kind, @Nullable Cause cause, int status) {
        book.requestEnded(atNanos, request, dueNanos, traffic, kind, cause, status);
    }

    @Override
    public void tunnelEnded(
            long atNanos,
            long openedNanos,
            long request,
            long dueNanos,
            int traffic,
            int kind,
            @Nullable Cause cause,
            int status) {
        book.tunnelEnded(atNanos, openedNanos, request, dueNanos, traffic, kind, cause, status);
    }

    @Override
    public void attemptPicked(long atNanos, int pool, int backend, long request, int attempt, int inFlight) {
        book.attemptPicked(atNanos, pool, backend, request, attempt, inFlight);
    }

    @Override
    public void stood(Transition transition) {
        StringBuilder row = Fixed.seconds(standing.row(), transition.atNanos()).append(',');
        Csv.field(row, cast.backends().get(transition.backend()).name());
        row.append(',').append(Words.of(transition.from()));
        row.append(',').append(Words.of(transition.to()));
        row.append(',').append(Words.of(transition.cause()));
        row.append(',').append(transition.to().pickable());
        standing.write();
    }

    @Override
    public void loadRead(long atNanos, int backend, long number, int headroomMilli, boolean fresh) {
        if (guidance.take(backend, fresh) == Guidance.Change.NONE || readings == null) {
            return;
        }
        StringBuilder row = Fixed.seconds(readings.row(), atNanos).append(',');
        Csv.field(row, cast.backends().get(backend).name());
        row.append(',').append(number).append(',');
        Fixed.decimals(row, headroomMilli / 1e3, 3).append(',').append(fresh);
        readings.write();
    }

    @Override
    public void cueApplied(long atNanos, long dueNanos, Cue cue, By by) {
        handCues += by == By.HAND ? 1 : 0;
        StringBuilder row = Fixed.seconds(cues.row(), dueNanos).append(',');
        Fixed.seconds(row, atNanos).append(',');
        Csv.field(row, CueWords.name(cue, by)).append(',');
        Csv.field(row, CueWords.action(cue, by)).append(',').append(Words.of(by));
        cues.write();
    }

    @Override
    public void sampled(long atNanos, Sample sample) {
        book.sampled(atNanos, sample);
        if (atNanos - flushedNanos >= FLUSH_NANOS) {
            flushedNanos = atNanos;
            flush();
        }
    }

    @Override
    public void interrupted(long atNanos) {
        book.interrupted(atNanos);
    }

    @Override
    public void ended(long atNanos, boolean complete) {
        this.complete = complete;
        book.ended(atNanos, complete);
        slices.close();
        standing.close();
        cues.close();
        if (readings != null) {
            readings.close();
        }
        latency.close();
    }

    /**
     * Writes what can be written only at the end, after {@link #ended}: the verdict.
     *
     * @return the verdict, unfit and saying why when something of the run could not be written
     */
    public Verdict finish(Verdict verdict) {
        Verdict whole = judged(verdict);
        replace(RunFolder.VERDICT, RunJson.verdict(head, whole));
        replace(RunFolder.JUNIT, JunitXml.text(head.drill().name(), whole));
        replace(RunFolder.RUN, RunJson.run(head, cast, complete ? "complete" : "interrupted", whole));
        return judged(verdict);
    }

    /** One line about what could not be written, or null. */
    public @Nullable String trouble() {
        return trouble.line();
    }

    private Verdict judged(Verdict verdict) {
        String line = trouble.line();
        Verdict whole = line == null ? verdict : verdict.with(new SelfCheck("record of the run", false, line));
        return whole.withHandCues(handCues);
    }

    private void flush() {
        slices.flush();
        standing.flush();
        cues.flush();
        if (readings != null) {
            readings.flush();
        }
    }

    private void replace(String name, String text) {
        trouble.guard(folder.file(name), () -> folder.replace(name, text));
    }
}
