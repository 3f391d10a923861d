package steelyard.balancer.core.standing;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import java.util.stream.IntStream;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import steelyard.balancer.settings.BackendSettings;
import steelyard.balancer.settings.ReserveSettings;

/** Who may be picked, by every kind of member. */
class EligibilityTest {

    /**
     * A letter a member: U up, D down, w withdrawn, d draining; tiers as digits; expected: who may be picked.
     *
     * <p>Standby 50 %: with two of tier 1, one able is not less than half, none is; of three, one is less. Last resort 40 %:
     * one able of three admitted is a third, one of two is a half.
     */
    @ParameterizedTest
    @CsvSource({
        // members, tiers, standby, last resort, may be picked
        "UUU, 111, 0,   0,   yyy",
        "UDw, 111, 0,   0,   ynn",
        "UdU, 111, 0,   0,   yny",
        "UUUU,1122,0.5, 0,   yynn",
        "UDUU,1122,0.5, 0,   ynnn",
        "DDUU,1122,0.5, 0,   nnyy",
        "wwUU,1122,0.5, 0,   nnyy",
        "DDDU,1122,0.5, 0,   nnny",
        "UDDU,1112,0.5, 0,   ynny",
        "UDD, 111, 0,   0.4, yyy",
        "UDw, 111, 0,   0.4, ynn",
        "DDw, 111, 0,   0.4, yyn",
        "DDd, 111, 0,   0.4, yyn",
        "www, 111, 0,   0.4, nnn",
        "DDDU,1112,0.5, 0.4, yyyy",
        "UDDD,1112,0.5, 0,   ynnn",
    })
    void open_ofEveryMember_followsStandingsTiersAndTheLastResort(
            String members, String tiers, double standby, double lastResort, String expected) {
        int count = members.length();
        BackendStanding[] standings = new BackendStanding[count];
        List<BackendSettings> settings = IntStream.range(0, count)
                .mapToObj(i -> new BackendSettings("backend-" + i, 1, 0, false, tiers.charAt(i) - '0'))
                .toList();
        for (int i = 0; i < count; i++) {
            standings[i] = new BackendStanding(i, null, members.charAt(i) != 'D', null, null);
        }
        Eligibility eligibility = new Eligibility(standings, settings, new ReserveSettings(lastResort, standby));
        for (int i = 0; i < count; i++) {
            if (members.charAt(i) == 'w') {
                standings[i].withdraw(0);
            } else if (members.charAt(i) == 'd') {
                standings[i].drain(10, 0);
            }
            eligibility.changed(i);
        }

        StringBuilder open = new StringBuilder();
        for (int i = 0; i < count; i++) {
            open.append(eligibility.open(i) ? 'y' : 'n');
        }
        assertThat(open.toString()).isEqualTo(expected);
    }
}
