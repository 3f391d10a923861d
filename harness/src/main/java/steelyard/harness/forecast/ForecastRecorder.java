package steelyard.harness.forecast;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;
import steelyard.harness.record.Cast;
import steelyard.harness.record.Csv;
import steelyard.harness.record.CueWords;
import steelyard.harness.record.Fixed;
import steelyard.harness.record.JunitXml;
import steelyard.harness.record.Machine;
import steelyard.harness.record.RunFolder;
import steelyard.harness.record.RunHead;
import steelyard.harness.record.RunJson;
import steelyard.harness.record.Words;

/**
 * Writes the run folder of a forecast: {@code plays.csv} as plays come, so that a killed forecast leaves what it had,
 * everything else at the end. The same series gives the same bytes in every file but {@code machine.json}.
 */
public final class ForecastRecorder implements AutoCloseable {
    private final RunFolder folder;
    private final RunHead head;
    private final Series series;
    private final double hold;
    private final Bands bands;
    private final PlayRows rows;

    /**
     * Begins the folder.
     *
     * @param hold the share of plays in which an expectation must hold, from 0 to 1
     * @throws IOException when it cannot be written
     */
    public ForecastRecorder(RunFolder folder, RunHead head, Series series, double hold, Machine machine)
            throws IOException {
        this.folder = folder;
        this.head = head;
        this.series = series;
        this.hold = hold;
        bands = new Bands(series);
        folder.replace(RunFolder.RUN, ForecastJson.run(head, series, hold, bands, "playing", null));
        folder.replace(RunFolder.MACHINE, RunJson.machine(machine));
        rows = new PlayRows(folder.file(RunFolder.PLAYS));
    }

    /** Where the plays of the series are to leave their slices. */
    public Bands bands() {
        return bands;
    }

    /**
     * Writes the row of a play; plays come in order.
     *
     * @throws UncheckedIOException when it cannot be written
     */
    public void played(Play play) {
        try {
            rows.write(play);
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    /**
     * Writes the rest.
     *
     * @param forecast null when nothing was played
     * @throws IOException when something cannot be written
     */
    public void finish(@Nullable Forecast forecast) throws IOException {
        rows.close();
        boolean complete = forecast != null && forecast.played().complete();
        Files.writeString(folder.file(RunFolder.SLICES), new SliceFile(bands).text());
        Files.writeString(folder.file(RunFolder.STANDING), standing());
        Files.writeString(folder.file(RunFolder.CUES), cues());
        Files.writeString(folder.file(RunFolder.LATENCY), LatencyFile.text(bands.seconds()));
        if (forecast != null) {
            folder.replace(RunFolder.VERDICT, ForecastJson.verdict(head, forecast));
            folder.replace(RunFolder.JUNIT, JunitXml.text(series.drill().name(), cases(forecast)));
        }
        String ended = complete ? "complete" : "interrupted";
        folder.replace(RunFolder.RUN, ForecastJson.run(head, series, hold, bands, ended, forecast));
    }

    private static List<JunitXml.Case> cases(Forecast forecast) {
        List<JunitXml.Case> cases = new ArrayList<>();
        for (Foreseen each : forecast.expectations()) {
            String note = each.note() == null ? "" : " (" + each.note() + ")";
            String failure = "bound " + each.figure().boundText() + ", measured " + each.measured() + note
                    + ", held in " + each.heldText() + " of plays, wanted " + Foreseen.percent(forecast.hold()) + " %";
            cases.add(new JunitXml.Case(each.figure().title(), each.met(), failure));
        }
        cases.add(JunitXml.fitness(forecast.fit(), forecast.checks()));
        return cases;
    }

    /** Each change at the median of its instants, with the band of these and the share of plays that had it. */
    private String standing() {
        Cast cast = bands.cast();
        StringBuilder text = new StringBuilder("at,backend,from,to,cause,pickable,low,high,share\n");
        for (Changes.Change each : bands.changes().inOrder()) {
            Changes.Kind kind = each.kind();
            Fixed.seconds(text, StrictMath.round(each.at().median())).append(',');
            Csv.field(text, cast.backends().get(kind.backend()).name());
            text.append(',').append(Words.of(kind.from()));
            text.append(',').append(Words.of(kind.to()));
            text.append(',').append(Words.of(kind.cause()));
            text.append(',').append(kind.to().pickable()).append(',');
            Fixed.seconds(text, StrictMath.round(each.at().low90())).append(',');
            Fixed.seconds(text, StrictMath.round(each.at().high90())).append(',');
            Fixed.trimmed(text, (double) each.at().plays() / bands.plays(), 4).append('\n');
        }
        return text.toString();
    }

    private String cues() {
        StringBuilder text = new StringBuilder("due,at,cue,action,by\n");
        for (PlaySlices.Applied each : bands.cues()) {
            Fixed.seconds(text, each.dueNanos()).append(',');
            Fixed.seconds(text, each.atNanos()).append(',');
            Csv.field(text, CueWords.name(each.cue(), each.by())).append(',');
            Csv.field(text, CueWords.action(each.cue(), each.by()))
                    .append(',')
                    .append(Words.of(each.by()))
                    .append('\n');
        }
        return text.toString();
    }

    /** Closes what {@link #finish} has not. */
    @Override
    public void close() throws IOException {
        rows.close();
    }
}
