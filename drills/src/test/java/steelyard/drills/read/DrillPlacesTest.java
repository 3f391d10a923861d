package steelyard.drills.read;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;

class DrillPlacesTest {
    private final DrillPlaces places = DrillPlaces.of("d", """
            stage:
              pools: {seats: {front: {port: 18080}}}
            traffic:
              - {to: seats, rate: 10/s}
              - {to: seats, rate: 20/s}
            """);

    @Test
    void problem_atAKey_namesItsPlace() {
        assertThat(places.problem("taken", "choose another", "stage", "pools", "seats", "front"))
                .hasToString("d:2:19: taken; choose another");
    }

    @Test
    void notice_inAList_namesThePlaceOfTheKeyInItsEntry() {
        assertThat(places.notice("too fast", "slow down", "traffic", "1", "rate"))
                .hasToString("d:5:17: notice: too fast; slow down");
    }

    @Test
    void problem_atAKeyThatIsNotThere_namesWhatThereIsOfThePath() {
        assertThat(places.has("traffic", "1", "steps")).isFalse();
        assertThat(places.has("traffic", "1", "rate")).isTrue();
        assertThat(places.problem("odd", "change it", "traffic", "7", "steps")).hasToString("d:3:1: odd; change it");
    }

    @Test
    void problem_inATextThatIsNoYaml_namesTheFile() {
        assertThat(DrillPlaces.of("d", "a: [").problem("odd", "change it", "a")).hasToString("d: odd; change it");
    }
}
