package steelyard.arch;

import static com.tngtech.archunit.base.DescribedPredicate.not;
import static com.tngtech.archunit.core.domain.JavaClass.Predicates.resideInAPackage;
import static com.tngtech.archunit.core.domain.JavaClass.Predicates.type;
import static com.tngtech.archunit.lang.syntax.ArchRuleDefinition.noClasses;
import static com.tngtech.archunit.lang.syntax.ArchRuleDefinition.noMethods;
import static com.tngtech.archunit.library.GeneralCodingRules.ACCESS_STANDARD_STREAMS;
import static org.assertj.core.api.Assertions.assertThat;

import com.tngtech.archunit.base.DescribedPredicate;
import com.tngtech.archunit.core.domain.JavaCall;
import com.tngtech.archunit.core.domain.JavaClass;
import com.tngtech.archunit.core.domain.JavaClasses;
import com.tngtech.archunit.core.domain.JavaModifier;
import com.tngtech.archunit.core.importer.ImportOption;
import com.tngtech.archunit.junit.AnalyzeClasses;
import com.tngtech.archunit.junit.ArchTest;
import com.tngtech.archunit.lang.ArchRule;
import java.time.Clock;
import java.util.Random;
import java.util.Set;
import java.util.SplittableRandom;
import java.util.concurrent.TimeUnit;

/** What decides and what behaves is told the time and draws by key: no sockets, threads, clocks or dice of its own. */
@AnalyzeClasses(packages = "steelyard", importOptions = ImportOption.DoNotIncludeTests.class)
class PurityRulesTest {
    private static final String[] PURE = {
        "steelyard.drills..",
        "steelyard.balancer.core..",
        "steelyard.balancer.settings..",
        "steelyard.backends.behave..",
        "steelyard.harness.record..",
        "steelyard.harness.traffic..",
        "steelyard.harness.conduct..",
        "steelyard.harness.judge.."
    };
    private static final int PURE_LEAST = 150;
    private static final String PLAY_CLOCK = "steelyard.harness.stage.live.PlayClock";
    private static final String CLI = "steelyard.harness.cli..";

    private static final Set<String> WALL = Set.of(
            "java.lang.System.currentTimeMillis",
            "java.time.Instant.now",
            "java.time.LocalDate.now",
            "java.time.LocalTime.now",
            "java.time.LocalDateTime.now",
            "java.time.OffsetDateTime.now",
            "java.time.ZonedDateTime.now");

    @ArchTest
    void purePackages_whenImported_haveTheirClasses(JavaClasses classes) {
        long found = classes.stream().filter(inAny(PURE)).count();
        assertThat(found).isGreaterThanOrEqualTo(PURE_LEAST);
    }

    @ArchTest
    static final ArchRule pure_code_opens_no_sockets = noClasses()
            .that()
            .resideInAnyPackage(PURE)
            .should()
            .dependOnClassesThat()
            .resideInAnyPackage("io.netty..", "java.net..", "java.nio.channels..");

    @ArchTest
    static final ArchRule pure_code_has_no_threads_and_no_locks = noClasses()
            .that()
            .resideInAnyPackage(PURE)
            .should()
            .dependOnClassesThat(resideInAPackage("java.util.concurrent..")
                    .and(not(type(TimeUnit.class)))
                    .or(type(Thread.class)));

    @ArchTest
    static final ArchRule pure_code_synchronizes_nothing = noMethods()
            .that()
            .areDeclaredInClassesThat()
            .resideInAnyPackage(PURE)
            .should()
            .haveModifier(JavaModifier.SYNCHRONIZED);

    @ArchTest
    static final ArchRule pure_code_reads_no_clock = noClasses()
            .that()
            .resideInAnyPackage(PURE)
            .should()
            .callMethodWhere(reads(WALL))
            .orShould()
            .dependOnClassesThat(type(Clock.class));

    @ArchTest
    static final ArchRule pure_code_throws_no_dice_of_its_own = noClasses()
            .that()
            .resideInAnyPackage(PURE)
            .should()
            .dependOnClassesThat(type(Random.class).or(type(SplittableRandom.class)))
            .orShould()
            .callMethodWhere(reads(Set.of("java.lang.Math.random", "java.util.UUID.randomUUID")));

    @ArchTest
    static final ArchRule only_plays_of_a_forecast_has_threads = noClasses()
            .that()
            .resideInAPackage("steelyard.harness.forecast")
            .and()
            .haveNameNotMatching(".*\\.Plays(\\$.*)?")
            .should()
            .dependOnClassesThat(resideInAPackage("java.util.concurrent..").or(type(Thread.class)));

    @ArchTest
    static final ArchRule a_forecast_reads_no_clock = noClasses()
            .that()
            .resideInAPackage("steelyard.harness.forecast")
            .should()
            .callMethodWhere(reads(WALL))
            .orShould()
            .dependOnClassesThat(type(Clock.class));

    @ArchTest
    static final ArchRule only_the_play_clock_reads_elapsed_time = noClasses()
            .that()
            .doNotHaveFullyQualifiedName(PLAY_CLOCK)
            .should()
            .callMethodWhere(reads(Set.of("java.lang.System.nanoTime")));

    @ArchTest
    void playClock_always_readsElapsedTime(JavaClasses classes) {
        assertThat(classes.get(PLAY_CLOCK).getMethodCallsFromSelf())
                .anyMatch(reads(Set.of("java.lang.System.nanoTime")));
    }

    @ArchTest
    static final ArchRule only_the_command_line_writes_to_the_standard_streams =
            noClasses().that().resideOutsideOfPackage(CLI).should(ACCESS_STANDARD_STREAMS);

    private static DescribedPredicate<JavaClass> inAny(String... packages) {
        return JavaClass.Predicates.resideInAnyPackage(packages);
    }

    private static DescribedPredicate<JavaCall<?>> reads(Set<String> methods) {
        return DescribedPredicate.describe(
                "calls one of " + methods,
                call -> methods.contains(call.getTargetOwner().getName() + "." + call.getName()));
    }
}
