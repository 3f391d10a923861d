package steelyard.arch;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Set;
import java.util.TreeSet;
import java.util.stream.Collectors;
import org.junit.jupiter.api.Test;

/** Rules about files, which no compiler holds. */
class SourceTreeTest {
    private static final Set<String> TOP = new TreeSet<>(
            List.of("pom.xml", "README.md", "DEVELOPERS.md", "balancer", "backends", "drills", "harness", "tests"));

    /** Written in two parts, or this file would hold them. */
    private static final List<String> FOREIGN = List.of(
            "/wo" + "rk/",
            "/ro" + "ot/",
            "/ho" + "me/",
            "repo." + "maven",
            "repo1." + "maven",
            "registry." + "npm",
            "artifac" + "tory",
            "nex" + "us");

    /** Purpose stands in the first sentence; the class to read first is a link. */
    private static final List<String> PACKAGE_INFO =
            List.of("@NullMarked", "llowed dependencies: ", "hread rule: ", "irst", "{@link ");

    @Test
    void topLevel_always_holdsTheAllowedNamesAndDotFiles() {
        Set<String> found = House.topLevel().stream()
                .map(path -> path.getFileName().toString())
                .filter(name -> !name.startsWith("."))
                .collect(Collectors.toCollection(TreeSet::new));
        assertThat(found).isEqualTo(TOP);
    }

    @Test
    void files_always_holdNoPathOfAMachineAndNoRegistry() {
        List<Path> files = House.files();
        assertThat(files).hasSizeGreaterThan(200);
        for (Path file : files) {
            String text = House.text(file);
            for (String foreign : FOREIGN) {
                assertThat(text.contains(foreign))
                        .as("%s holds %s", file, foreign)
                        .isFalse();
            }
        }
    }

    @Test
    void packages_ofTheMainCode_sayWhatTheyAreFor() {
        Set<Path> folders = House.files().stream()
                .filter(file -> file.toString().contains("/src/main/java/"))
                .filter(file -> file.toString().endsWith(".java"))
                .map(Path::getParent)
                .collect(Collectors.toCollection(TreeSet::new));
        assertThat(folders).hasSizeGreaterThan(20);
        for (Path folder : folders) {
            Path info = folder.resolve("package-info.java");
            assertThat(Files.exists(info)).as("%s exists", info).isTrue();
            String words = House.text(info).replaceAll("\\s*\\n \\*\\s*", " ");
            PACKAGE_INFO.forEach(part -> assertThat(words).as("%s", info).contains(part));
        }
    }
}
