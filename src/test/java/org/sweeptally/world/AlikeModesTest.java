package org.sweeptally.world;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.sweeptally.filter.Component;
import org.sweeptally.model.CoordinatedTurn;
import org.sweeptally.model.MotionMode;
import org.sweeptally.model.MotionProfile;
import org.sweeptally.model.NearlyConstantVelocity;

/**
 * A filter whose modes all move alike is the filter with one, to rounding. There is little clutter: among close
 * components rounding may decide how pasts are dealt out that fit equally well.
 */
class AlikeModesTest {

    private static final WorldSettings WORLD = new WorldSettings(4000, 200, 5, 600, 0.05, 6, 2.5, 60, 15, 0.9, 0.5);

    @Test
    void modesThatMoveAlikeAreOneMode() {
        NearlyConstantVelocity straight = new NearlyConstantVelocity(0.05);
        assertAlike(List.of(kind("craft", 1, List.of(
                new MotionMode("straight", straight, 0.5, 20),
                new MotionMode("turning-left", new CoordinatedTurn(0, 0.05), 0.3, 5),
                new MotionMode("turning-right", new CoordinatedTurn(0, 0.05), 0.2, 60)))));
    }

    @Test
    void kindsThatMoveAndStayAlikeAreOneKind() {
        List<MotionMode> modes = List.of(
                new MotionMode("straight", new NearlyConstantVelocity(0.05), 1, Double.POSITIVE_INFINITY));
        assertAlike(List.of(kind("ferries", 0.25, modes), kind("others", 0.75, modes)));
    }

    private static MotionProfile kind(String name, double share, List<MotionMode> modes) {
        return new MotionProfile(name, share, 600, 6, Double.POSITIVE_INFINITY, modes);
    }

    private static void assertAlike(List<MotionProfile> profiles) {
        for (long seed = 1; seed <= 5; seed++) {
            List<Course> courses = List.of(
                    new Course(-500, 0, 0, 8), new Course(500, 900, 180, 6), new Course(-1200, -900, 90, 5));
            CourseRun several = new CourseRun(WORLD, profiles, seed, courses);
            CourseRun one = new CourseRun(WORLD, Kinds.straightOnly(), seed, courses);
            while (several.next() & one.next()) {
                List<Component> found = several.filter().components();
                List<Component> expected = one.filter().components();
                assertThat(found).as("seed %s, scan %s", seed, one.scan()).hasSameSizeAs(expected);
                for (int i = 0; i < found.size(); i++) {
                    String as = "seed " + seed + ", scan " + one.scan() + ", component " + i;
                    Component a = found.get(i);
                    Component b = expected.get(i);
                    assertThat(a.identity()).as(as).isEqualTo(b.identity());
                    assertThat(a.existence()).as(as).isCloseTo(b.existence(), within(1e-6));
                    assertThat(a.density().east()).as(as).isCloseTo(b.density().east(), within(1e-4));
                    assertThat(a.density().mean.a4).as(as).isCloseTo(b.density().mean.a4, within(1e-5));
                    assertThat(a.density().covariance.a11).as(as).isCloseTo(b.density().covariance.a11, within(1e-3));
                }
            }
            assertThat(one.filter().components()).as("seed %s", seed).hasSizeGreaterThanOrEqualTo(2);
        }
    }
}
