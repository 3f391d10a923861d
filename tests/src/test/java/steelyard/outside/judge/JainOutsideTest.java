package steelyard.outside.judge;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.io.InputStream;
import java.nio.charset.StandardCharsets;
import java.util.Arrays;
import java.util.List;
import org.apache.commons.math3.stat.descriptive.DescriptiveStatistics;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;
import steelyard.harness.judge.Jain;

/** Jain's index against printed values (jain.csv, its source in its head) and against a second formula. */
class JainOutsideTest {
    private static final double PRINTED_TO = 0.5e-10;
    private static final double EXACT = 1e-12;

    /** A row of the table: values and the index that is printed for them. */
    record Row(double[] values, int n, double index) {
        static Row of(String line) {
            String[] fields = line.split(",", 4);
            double[] values = Arrays.stream(fields[0].split(" "))
                    .mapToDouble(Double::parseDouble)
                    .toArray();
            return new Row(values, Integer.parseInt(fields[1]), Double.parseDouble(fields[2]));
        }
    }

    static List<Row> rows() throws IOException {
        try (InputStream in = JainOutsideTest.class.getResourceAsStream("jain.csv")) {
            return new String(in.readAllBytes(), StandardCharsets.UTF_8)
                    .lines()
                    .filter(line -> !line.startsWith("#") && !line.startsWith("values,"))
                    .map(Row::of)
                    .toList();
        }
    }

    @Test
    void rows_ofTheTable_areAllThere() throws IOException {
        assertThat(rows()).hasSize(17);
    }

    @ParameterizedTest
    @MethodSource("rows")
    void index_ofPrintedRow_isThePrintedValue(Row row) {
        assertThat(row.values()).hasSize(row.n());
        // Values with fewer decimals than ten are printed in full.
        boolean inFull = Double.toString(row.index()).length() < 12;
        assertThat(Jain.index(row.values())).isCloseTo(row.index(), within(inFull ? EXACT : PRINTED_TO));
    }

    @ParameterizedTest
    @MethodSource("rows")
    void index_ofPrintedRow_isOneOverOnePlusSquaredCoefficientOfVariation(Row row) {
        DescriptiveStatistics statistics = new DescriptiveStatistics(row.values());
        double squared = statistics.getPopulationVariance() / (statistics.getMean() * statistics.getMean());
        assertThat(Jain.index(row.values())).isCloseTo(1 / (1 + squared), within(EXACT));
    }

    @Test
    void index_scaled_isTheSame() {
        assertThat(Jain.index(new double[] {5e9, 5e9, 10e9}))
                .isCloseTo(Jain.index(new double[] {5, 5, 10}), within(EXACT));
    }

    @Test
    void index_allZeroOrNone_isUndefined() {
        assertThat(Jain.index(new double[] {0, 0, 0})).isNaN();
        assertThat(Jain.index(new double[0])).isNaN();
    }
}
