package steelyard.arch;

import static com.tngtech.archunit.lang.syntax.ArchRuleDefinition.noClasses;
import static com.tngtech.archunit.library.dependencies.SlicesRuleDefinition.slices;
import static org.assertj.core.api.Assertions.assertThat;

import com.tngtech.archunit.core.domain.JavaClasses;
import com.tngtech.archunit.core.importer.ImportOption;
import com.tngtech.archunit.junit.AnalyzeClasses;
import com.tngtech.archunit.junit.ArchTest;
import com.tngtech.archunit.lang.ArchRule;
import java.util.List;
import java.util.Map;

/** Who may know whom: the modules, and the packages within a module. */
@AnalyzeClasses(packages = "steelyard", importOptions = ImportOption.DoNotIncludeTests.class)
class ModuleRulesTest {
    private static final String DRILLS = "steelyard.drills..";
    private static final String BALANCER = "steelyard.balancer..";
    private static final String BACKENDS = "steelyard.backends..";
    private static final String HARNESS = "steelyard.harness..";

    /** Within a module a package may use those before it, never those after it. */
    private static final List<List<String>> DOWNWARDS = List.of(
            List.of("steelyard.drills.model", "steelyard.drills.read"),
            List.of(
                    "steelyard.balancer.settings",
                    "steelyard.balancer.core.pick",
                    "steelyard.balancer.core.standing",
                    "steelyard.balancer.core.weigh",
                    "steelyard.balancer.core.decide",
                    "steelyard.balancer.live.."),
            List.of("steelyard.backends.behave", "steelyard.backends.stub", "steelyard.backends.fleet"),
            List.of(
                    "steelyard.harness.record",
                    "steelyard.harness.traffic",
                    "steelyard.harness.stage",
                    "steelyard.harness.conduct",
                    "steelyard.harness.judge",
                    "steelyard.harness.stage.virtual..",
                    "steelyard.harness.forecast",
                    "steelyard.harness.compare",
                    "steelyard.harness.tune",
                    "steelyard.harness.report",
                    "steelyard.harness.stage.live..",
                    "steelyard.harness.console",
                    "steelyard.harness.cli"));

    /** Fewer classes than that were found only if they were not looked for. */
    private static final Map<String, Integer> LEAST_CLASSES =
            Map.of(DRILLS, 50, BALANCER, 80, BACKENDS, 40, HARNESS, 120);

    @ArchTest
    void modules_whenImported_haveTheirClasses(JavaClasses classes) {
        LEAST_CLASSES.forEach((module, least) -> {
            String prefix = module.replace("..", ".");
            long found = classes.stream()
                    .filter(type -> type.getPackageName().startsWith(prefix))
                    .count();
            assertThat(found).as(module).isGreaterThanOrEqualTo(least);
        });
    }

    @ArchTest
    static final ArchRule drills_know_no_other_module = noClasses()
            .that()
            .resideInAPackage(DRILLS)
            .should()
            .dependOnClassesThat()
            .resideInAnyPackage(BALANCER, BACKENDS, HARNESS);

    @ArchTest
    static final ArchRule balancer_knows_no_other_module = noClasses()
            .that()
            .resideInAPackage(BALANCER)
            .should()
            .dependOnClassesThat()
            .resideInAnyPackage(DRILLS, BACKENDS, HARNESS);

    @ArchTest
    static final ArchRule backends_know_no_other_module = noClasses()
            .that()
            .resideInAPackage(BACKENDS)
            .should()
            .dependOnClassesThat()
            .resideInAnyPackage(DRILLS, BALANCER, HARNESS);

    @ArchTest
    static final ArchRule packages_have_no_cycles =
            slices().matching("steelyard.(**)").should().beFreeOfCycles();

    @ArchTest
    void packages_withinAModule_lookOnlyDownwards(JavaClasses classes) {
        for (List<String> order : DOWNWARDS) {
            for (int place = 0; place < order.size() - 1; place++) {
                String[] above = order.subList(place + 1, order.size()).toArray(String[]::new);
                noClasses()
                        .that()
                        .resideInAPackage(order.get(place))
                        .should()
                        .dependOnClassesThat()
                        .resideInAnyPackage(above)
                        .check(classes);
            }
        }
    }
}
