package steelyard.balancer.live;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.io.InputStream;
import java.lang.reflect.Method;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Set;
import java.util.TreeSet;
import java.util.stream.Collectors;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;

/** Every row of the table of duties has a test, and no test names a row that is not there. */
class DutyTableTest {
    @Test
    void rows_eachIsHeldByATest() throws Exception {
        Set<String> rows = rows();
        assertThat(rows).as("rows that were read").hasSizeGreaterThan(100);
        Set<String> missing = new TreeSet<>(rows);
        missing.removeAll(tested());
        assertThat(missing).as("rows without a test").isEmpty();
        Set<String> unknown = tested();
        unknown.removeAll(rows);
        assertThat(unknown).as("tests of no row").isEmpty();
    }

    private static Set<String> rows() throws IOException {
        try (InputStream in = DutyTableTest.class.getResourceAsStream("http_intermediary.csv")) {
            return new String(in.readAllBytes(), StandardCharsets.UTF_8)
                    .lines()
                    .filter(line -> line.matches("H[0-9]{3},.*"))
                    .map(line -> line.substring(0, 4))
                    .collect(Collectors.toCollection(TreeSet::new));
        }
    }

    private static Set<String> tested() throws Exception {
        Path root = Path.of(DutyTableTest.class
                .getProtectionDomain()
                .getCodeSource()
                .getLocation()
                .toURI());
        Set<String> tested = new TreeSet<>();
        for (String name : classes(root)) {
            Class<?> found = Class.forName(name, false, DutyTableTest.class.getClassLoader());
            for (Method method : found.getDeclaredMethods()) {
                Duty duty = method.getAnnotation(Duty.class);
                if (duty != null) {
                    assertThat(method.isAnnotationPresent(Test.class))
                            .as("%s is a test", method)
                            .isTrue();
                    tested.addAll(List.of(duty.value()));
                }
            }
        }
        return tested;
    }

    private static List<String> classes(Path root) throws IOException {
        try (Stream<Path> files = Files.walk(root)) {
            return files.map(file -> root.relativize(file).toString())
                    .filter(file -> file.endsWith("Test.class"))
                    .map(file ->
                            file.substring(0, file.length() - ".class".length()).replace('/', '.'))
                    .toList();
        }
    }
}
