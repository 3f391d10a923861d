package steelyard.harness.forecast;

import java.util.ArrayList;
import java.util.List;
import java.util.Objects;
import steelyard.harness.record.Csv;
import steelyard.harness.record.Fixed;
import steelyard.harness.record.Slice;
import steelyard.harness.record.Words;

/**
 * Writes {@code slices.csv} of a forecast, one row a slice of the play's length.
 *
 * <p>First come the columns of a rehearsal, in their order, with medians over plays; {@code NAME:standing} is the one
 * that most plays had. A name is that of a backend, or of a group of backends. Behind these, {@code NAME:share} is the
 * share of its pool's attempts and {@code NAME:standing-share} the share of plays with that standing, followed by the
 * columns that a rehearsal has of pools and of headroom. Then each column
 * of numbers comes again three times: {@code COLUMN:low} and {@code COLUMN:high} are its 5 % and 95 % quantiles over
 * plays, {@code COLUMN:mean} its mean.
 */
final class SliceFile {
    private static final int DECIMALS = 4;
    private static final int STANDING_BEHIND = 2;

    private final Bands bands;
    private final List<Field> fields = new ArrayList<>();
    private final List<Named> banded = new ArrayList<>();

    private record Named(String name, Band band) {}

    private interface Field {
        void append(StringBuilder row, int slice);
    }

    SliceFile(Bands bands) {
        this.bands = bands;
    }

    String text() {
        StringBuilder text = new StringBuilder("slice,from");
        requests(text);
        for (int group = 0; group < bands.groups().size(); group++) {
            backend(text, group);
        }
        for (int group = 0; group < bands.groups().size(); group++) {
            shares(text, group);
        }
        for (int extra = 0; extra < bands.extras().size(); extra++) {
            median(text, bands.extras().get(extra), bands.ofExtra(extra));
        }
        for (Named each : List.copyOf(banded)) {
            numbers(text, each.name() + ":low", each.band().low);
            numbers(text, each.name() + ":high", each.band().high);
            numbers(text, each.name() + ":mean", each.band().mean);
        }
        text.append('\n');
        for (int slice = 0; slice < bands.slices() && bands.plays() > 0; slice++) {
            text.append(slice).append(',');
            Fixed.seconds(text, slice * Slice.NANOS);
            for (Field each : fields) {
                each.append(text.append(','), slice);
            }
            text.append('\n');
        }
        return text.toString();
    }

    private void requests(StringBuilder head) {
        List<String> names = BandColumns.ofRequests();
        for (int column = 0; column < names.size(); column++) {
            median(head, names.get(column), bands.ofRequests(column));
        }
    }

    private void backend(StringBuilder head, int group) {
        String name = bands.groups().get(group).name() + ":";
        for (int column = 0; column < BandColumns.OF_GROUP.size(); column++) {
            if (column == STANDING_BEHIND) {
                Csv.field(head.append(','), name + "standing");
                fields.add((row, slice) -> row.append(
                        Words.of(Objects.requireNonNull(bands.standing(group, slice), "a play's standing"))));
            }
            median(head, name + BandColumns.OF_GROUP.get(column), bands.ofGroup(group, column));
        }
    }

    private void shares(StringBuilder head, int group) {
        String name = bands.groups().get(group).name() + ":";
        median(head, name + "share", bands.share(group));
        Csv.field(head.append(','), name + "standing-share");
        fields.add((row, slice) -> Fixed.trimmed(row, bands.standingShare(group, slice), DECIMALS));
    }

    private void median(StringBuilder head, String name, Band band) {
        numbers(head, name, band.median);
        banded.add(new Named(name, band));
    }

    private void numbers(StringBuilder head, String name, double[] values) {
        Csv.field(head.append(','), name);
        fields.add((row, slice) -> Fixed.trimmed(row, values[slice], DECIMALS));
    }
}
