package steelyard.harness.cli;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;
import steelyard.drills.read.DrillLibrary;

class CommandLineTest {
    private final StringWriter out = new StringWriter();
    private final StringWriter err = new StringWriter();

    @TempDir
    private Path folder;

    private int run(String... arguments) {
        return Main.run(new PrintWriter(out), new PrintWriter(err), arguments);
    }

    @ParameterizedTest
    @CsvSource(delimiter = '|', textBlock = """
                    rehears                               | unknown command 'rehears'; did you mean 'rehearse'?
                    chekc some.yaml                       | unknown command 'chekc'; did you mean 'check'?
                    check --debgu lose-one-of-three       | unknown option '--debgu'; did you mean '--debug'?
                    rehearse --plan lose-one-of-three     | unknown option '--plan'; did you mean '--plain'?
                    rehearse --sed                        | unknown option '--sed'; did you mean '--seed'?
                    rehearse                              | missing required parameter: 'DRILL'; `steelyard help rehearse`
                    rehearse lose-one-of-three slow-one   | one argument too many, 'slow-one'; `steelyard help rehearse`
                    rehearse --seed 99999999999999999999 slow-one | is out of range, from -9223372036854775808 to 9223372036854775807
                    rehearse --seed five slow-one         | '--seed': 'five' is not a whole number; `steelyard help rehearse`
                    rehearse --backends elsewhere slow-one| --backends can only be embedded, not 'elsewhere'
                    forecast --hold 90 slow-one           | '90' is not a share from 0% to 100%, such as 90%; `steelyard help forecast`
                    forecast --hold 101% slow-one         | '101%' is not a share from 0% to 100%
                    forecast --plays 0 slow-one           | --plays takes a whole number from 1 to 100000, not '0'
                    forecast --plays many slow-one        | 'many' is not a
                    forecast --threads 0 slow-one         | --threads takes a whole number from 1 to 256, not '0'
                    tune slow-one --want failed --against cut                                              | missing required option: '--vary=PATH=VALUE,...'
                    tune slow-one --want failed --against cut --vary probe.every                            | --vary 'probe.every' names no setting and values; write it like probe.every=1s,2s,5s
                    tune slow-one --want failed --against cut --vary prob.every=1s                          | no 'prob' is written in this drill where the path leads; did you mean 'probe'?
                    tune slow-one --want failed --against cut --vary probe.evry=1s                          | with probe.evry 1s: slow-one:12:15: unknown key 'evry' in a probe; did you mean 'every'?
                    tune slow-one --want failed --against cut --vary probe.every=1                          | with probe.every 1: slow-one:12:37:
                    tune slow-one --want faild --against cut --vary probe.every=1s                          | --want 'faild' is no measure of this drill; did you mean 'failed'?
                    tune slow-one --want failed --against fairness,cut --vary probe.every=1s                | --against 'fairness,cut' is no measure of this drill; it has cut, failed, fairness
                    tune slow-one --want failed --against cut --vary probe.every=1s --plays 1               | --plays takes a whole number from 2 to 100000, not '1'
                    tune slow-one --want failed --against cut --vary probe.every=1s --confirm -1            | --confirm takes a whole number from 0 to 100, not '-1'
                    compare one                           | missing required parameter: 'RUN'
                    compare nowhere else                  | nowhere is not a folder; name a run folder
                    compare nowhere else --only faild     | --only names no measure 'faild' (did you mean 'failed'?)
                    compare nowhere else --margin 5       | '5' is not a share from 0% to 100%
                    rehearse loose-one-of-three           | no bundled drill 'loose-one-of-three'; did you mean 'lose-one-of-three'?
                    check nothing-like-it                 | no bundled drill 'nothing-like-it'; `steelyard drills` lists
                    check nowhere/slow-one.yaml           | nowhere/slow-one.yaml: there is no such file
                    drills --show slow-on                 | no bundled drill 'slow-on'; did you mean 'slow-one'?
                    help rehears                          | unknown command 'rehears'
                    """)
    void commandLine_thatIsWrong_saysSoInOneLineWithARemedy(String line, String message) {
        assertThat(run(line.strip().split(" +"))).isEqualTo(2);
        assertThat(err.toString().strip()).contains(message).doesNotContain("\n", "\tat ");
        assertThat(out.toString()).isEmpty();
    }

    @ParameterizedTest
    @ValueSource(strings = {"check", "rehearse", "forecast"})
    void drill_withoutAName_isAskedFor(String command) {
        assertThat(run(command, "")).isEqualTo(2);
        assertThat(err.toString()).startsWith("steelyard: the name of the drill is empty; name a file");
    }

    @Test
    void out_belowAFile_saysWhichFileIsInTheWay() throws IOException {
        Path file = Files.writeString(folder.resolve("notes"), "x");
        assertThat(run("forecast", "--out", file.resolve("sub").toString(), "slow-one"))
                .isEqualTo(3);
        assertThat(err.toString()).contains("cannot be made, since notes is a file; name another folder");
    }

    @ParameterizedTest
    @ValueSource(strings = {"check", "rehearse", "forecast"})
    void drill_whoseAnswersCannotBeUsed_isWrongAtItsKey(String command) throws IOException {
        Path answers = Files.createDirectory(folder.resolve("answers"));
        String text = DrillLibrary.text("slow-one").orElseThrow();
        Path drill = folder.resolve("drill.yaml");
        Files.writeString(drill, text.replace("serves: {", "serves: {answers: answers, "));
        assertThat(run(command, drill.toString())).isEqualTo(2);
        assertThat(err.toString()).contains("drill.yaml:13:16: ").contains("no mapping in it");
        Files.writeString(answers.resolve("a.json"), "{\"response\": {\"colour\": 1}}");
        assertThat(run(command, drill.toString())).isEqualTo(2);
        assertThat(err.toString()).contains("a.json: not a mapping").doesNotContain("class ", "wiremock");
    }

    @Test
    void check_ofTooMuchTraffic_givesANoticeAtTheRate() throws IOException {
        String text = DrillLibrary.text("slow-one").orElseThrow();
        Path drill = Files.writeString(folder.resolve("drill.yaml"), text.replace("rate: 700/s", "rate: 25000/s"));
        assertThat(run("check", drill.toString())).isZero();
        assertThat(err.toString())
                .contains("notice: the traffic reaches 25000 requests a second")
                .matches("(?s).*drill.yaml:\\d+:5: .*");
    }

    @Test
    void commandLine_withoutACommand_saysSo() {
        assertThat(run()).isEqualTo(2);
        assertThat(err.toString())
                .isEqualToIgnoringNewLines("steelyard: a command is missing; `steelyard help` shows what there is");
    }

    @Test
    void check_ofEveryBundledDrill_isOk() {
        assertThat(DrillLibrary.names()).isNotEmpty();
        List<String> line = new ArrayList<>(DrillLibrary.names());
        line.add(0, "check");
        assertThat(run(line.toArray(String[]::new))).isZero();
        assertThat(out.toString().lines())
                .hasSize(DrillLibrary.names().size())
                .allMatch(each -> each.contains(": ok: "));
    }

    @Test
    void check_ofABrokenFileBesideAGoodOne_reportsEveryProblemAndGoesOn() throws IOException {
        Path broken = folder.resolve("broken.yaml");
        String text = DrillLibrary.text("lose-one-of-three").orElseThrow();
        Files.writeString(broken, text.replace("warm-up: 5s", "warmup: 5s").replace("lasts: 60s", "lasts: 60"));
        assertThat(run("check", broken.toString(), "slow-one")).isEqualTo(2);
        List<String> lines =
                err.toString().lines().filter(line -> !line.contains("notice:")).toList();
        assertThat(lines).hasSize(2);
        assertThat(lines.get(0))
                .matches(".*broken\\.yaml:\\d+:\\d+: unknown key 'warmup'.*; did you mean 'warm-up'\\?");
        assertThat(lines.get(1)).matches(".*broken\\.yaml:\\d+:\\d+: .*60.*; .*");
        assertThat(out.toString()).contains("slow-one: ok: ");
    }

    @Test
    void check_ofABundledNameWithItsEnding_findsIt() {
        assertThat(run("check", "slow-one.yaml")).isZero();
    }

    @Test
    void drills_always_listsEveryBundledDrillAndHowToCopyOne() {
        assertThat(run("drills")).isZero();
        assertThat(out.toString()).contains(DrillLibrary.names()).contains("drills --show NAME > my-drill.yaml");
    }

    @Test
    void drillsShow_ofAName_printsTheFileAsItIs() {
        assertThat(run("drills", "--show", "slow-one")).isZero();
        assertThat(out.toString()).isEqualTo(DrillLibrary.text("slow-one").orElseThrow());
    }

    @ParameterizedTest
    @ValueSource(strings = {"version", "--version", "-V"})
    void version_always_isTheBuilds(String word) {
        assertThat(run(word)).isZero();
        assertThat(out.toString()).matches("(?s)steelyard \\d+\\.\\d+\\.\\d+\\R.*");
    }

    @ParameterizedTest
    @ValueSource(strings = {"help", "--help", "help rehearse", "rehearse --help", "help check", "help drills"})
    void help_always_goesToStandardOutput(String line) {
        assertThat(run(line.split(" "))).isZero();
        assertThat(out.toString()).startsWith("Usage: steelyard");
        assertThat(err.toString()).isEmpty();
    }

    @Test
    void helpOfRehearse_always_carriesTheCaution() {
        run("help", "rehearse");
        assertThat(out.toString().replaceAll("\\s+", " "))
                .contains("Rehearse only on systems of your own, or with the authority to do so")
                .contains("never replaces that procedure");
    }

    @Test
    void helpOfCompare_always_namesAMeasureOnceAndTwoRuns() {
        run("help", "compare");
        assertThat(out.toString().replaceAll("\\s+", " "))
                .contains("[--only=MEASURE[,MEASURE...]]... ")
                .contains(" RUN RUN ")
                .containsOnlyOnce("a folder that holds run folders of one drill");
    }

    @ParameterizedTest
    @ValueSource(strings = {"rehearse", "forecast", "tune", "compare", "check", "drills", "completion", "version"})
    void help_ofACommand_hasOptionsUnderTheirHead(String command) {
        assertThat(run("help", command)).isZero();
        assertThat(out.toString()).containsPattern("\nOptions:\n");
    }

    @Test
    void help_always_listsEveryExitStatus() {
        run("help");
        assertThat(out.toString())
                .containsSubsequence("\n  0 ", "\n  1 ", "\n  2 ", "\n  3 ", "\n  129 ", "\n  130 ", "\n  143 ");
    }

    @Test
    void completion_inBash_completesADrillByNameOrFile() throws Exception {
        run("completion");
        Files.writeString(folder.resolve("slow-own.yaml"), "");
        Path script = Files.writeString(folder.resolve("script"), out.toString());
        String tab = "source " + script + "; COMP_CWORD=2; COMP_WORDS=(steelyard rehearse slow-); _complete_steelyard;"
                + " echo \"${COMPREPLY[*]}\"; COMP_CWORD=3; COMP_WORDS=(steelyard rehearse --backends e);"
                + " _complete_steelyard; echo \"${COMPREPLY[*]}\"";
        Process bash = new ProcessBuilder("bash", "-c", tab)
                .directory(folder.toFile())
                .redirectErrorStream(true)
                .start();
        String said = new String(bash.getInputStream().readAllBytes(), StandardCharsets.UTF_8);
        assertThat(said.split("\\s+")).contains("slow-one", "slow-own.yaml", "embedded");
        assertThat(out.toString()).doesNotContain("YOUR_APP_HOME", "picocli.info");
    }

    @Test
    void completion_always_namesEveryCommandAndTheBundledDrills() {
        assertThat(run("completion")).isZero();
        assertThat(out.toString())
                .contains("rehearse forecast tune compare check drills completion version help", "lose-one-of-three");
    }
}
