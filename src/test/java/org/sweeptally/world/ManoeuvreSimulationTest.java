package org.sweeptally.world;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import java.util.Locale;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.sweeptally.filter.Component;
import org.sweeptally.model.MotionProfile;
import org.sweeptally.world.Course.Leg;

/**
 * A craft at 8 m/s that twice turns by 90 degrees in 10 s, among clutter: the mean error scan by scan, over stated
 * seeds, of a filter with one model of motion and of one with several. Limits are our own; there is no source for them.
 */
class ManoeuvreSimulationTest {

    private static final int SEEDS = 30;
    private static final double MISSED_METRES = 200;
    private static final double[] TURNS_BEGIN = {80, 180};
    private static final double TURN_SECONDS = 10;
    private static final double SECONDS = 260;

    /** After a turn an estimate may take so long to settle; until then it is neither turn nor straight. */
    private static final double SETTLED_AFTER = 40;

    /** Metres. */
    private record Errors(double peak, double straight, double missed, double identities) {}

    @ParameterizedTest
    @CsvSource({"1, 10", "1, 15", "2.5, 10", "2.5, 15"})
    void turnsAreFollowedAndStraightCoursesStayExact(double periodSeconds, double sigmaMetres) {
        Errors one = errors("one model", Kinds.straightOnly(), periodSeconds, sigmaMetres);
        errors("one restless model", Kinds.straightOnly(0.5), periodSeconds, sigmaMetres);
        errors("straight and restless", Kinds.restless(), periodSeconds, sigmaMetres);
        Errors several = errors("straight, left and right", Kinds.turning(), periodSeconds, sigmaMetres);
        assertThat(several.peak() / one.peak()).as("peak error in turns").isLessThanOrEqualTo(0.6);
        assertThat(several.straight() / one.straight()).as("error on straight stretches").isLessThanOrEqualTo(1.1);
    }

    private static Errors errors(String name, List<MotionProfile> profiles, double periodSeconds, double sigmaMetres) {
        int scans = (int) Math.round(SECONDS / periodSeconds);
        WorldSettings world = new WorldSettings(4000, 200, 5, 600, 0.05, 6, periodSeconds, scans, sigmaMetres, 0.9, 20);
        double[] mean = new double[scans];
        int missed = 0;
        int identities = 0;
        for (long seed = 1; seed <= SEEDS; seed++) {
            CourseRun run = new CourseRun(world, profiles, seed, List.of(course(seed)));
            String last = null;
            while (run.next()) {
                Component component = run.shownNear(0, MISSED_METRES);
                mean[run.scan()] += (component == null ? MISSED_METRES : run.off(component, 0)) / SEEDS;
                missed += component == null && run.seconds() > SETTLED_AFTER ? 1 : 0;
                if (component != null && !component.identity().toString().equals(last)) {
                    last = component.identity().toString();
                    identities++;
                }
            }
        }
        Errors errors = new Errors(peak(mean, periodSeconds), straight(mean, periodSeconds),
                (double) missed / SEEDS, (double) identities / SEEDS);
        System.out.printf(
                Locale.ROOT,
                "a scan each %s s, sigma %s m, seeds 1 to %d, %s: peak %.1f m, straight %.2f m, %.2f scans missed,"
                        + " %.2f identities%n",
                periodSeconds, sigmaMetres, SEEDS, name, errors.peak(), errors.straight(), errors.missed(),
                errors.identities());
        return errors;
    }

    /** One turn to the left, one to the right, on a heading of its own. */
    private static Course course(long seed) {
        return new Course(
                0, 0, 37 * seed, 8,
                Leg.steady(TURNS_BEGIN[0]), Leg.turn(TURN_SECONDS, 9),
                Leg.steady(TURNS_BEGIN[1] - TURNS_BEGIN[0] - TURN_SECONDS), Leg.turn(TURN_SECONDS, -9));
    }

    private static double peak(double[] mean, double periodSeconds) {
        double peak = 0;
        for (int k = 0; k < mean.length; k++) {
            for (double begins : TURNS_BEGIN) {
                double since = k * periodSeconds - begins;
                boolean turns = since >= 0 && since <= TURN_SECONDS + SETTLED_AFTER;
                peak = turns ? Math.max(peak, mean[k]) : peak;
            }
        }
        return peak;
    }

    private static double straight(double[] mean, double periodSeconds) {
        double sum = 0;
        int count = 0;
        for (int k = 0; k < mean.length; k++) {
            boolean settled = k * periodSeconds >= SETTLED_AFTER;
            for (double begins : TURNS_BEGIN) {
                settled &= k * periodSeconds < begins || k * periodSeconds > begins + TURN_SECONDS + SETTLED_AFTER;
            }
            sum += settled ? mean[k] : 0;
            count += settled ? 1 : 0;
        }
        return sum / count;
    }
}
