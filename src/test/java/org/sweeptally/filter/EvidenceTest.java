package org.sweeptally.filter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.List;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.sweeptally.filter.ObjectEvidence.Kind;
import org.sweeptally.filter.ObjectEvidence.Step;
import org.sweeptally.model.Gaussian;

/** The steps that explain existence, against what Bayes' rule says each of them must be. */
class EvidenceTest {

    private static final List<ScanEvidence> HEARD = new ArrayList<>();

    private static ObjectFilter observed(FilterSettings settings, double existence) {
        DMatrix4x4 covariance = new DMatrix4x4();
        covariance.a11 = 4;
        covariance.a22 = 4;
        covariance.a33 = 1e-12;
        covariance.a44 = 1e-12;
        ObjectFilter filter = Begun.with(settings, new Gaussian(new DMatrix4(), covariance), LogOdds.of(existence));
        HEARD.clear();
        filter.observe(HEARD::add);
        return filter;
    }

    private static ObjectEvidence last() {
        return HEARD.get(HEARD.size() - 1).objects().get(0);
    }

    /** Missed again and again: Bayes' rule; Ristic, Vo, Vo and Farina 2013, IEEE TSP 61(13) (from memory). */
    @Test
    void aMissedDetectionsStepIsTheLogarithmOfTheProbabilityOfAMiss() {
        double[] expected = {1.0 / 11, 1.0 / 101, 1.0 / 1001, 1.0 / 10001, 1.0 / 100001};
        ObjectFilter filter = observed(Begun.undisturbed(0, 5), 0.5);
        for (double r : expected) {
            filter.update(FilterScene.scan(0, Begun.SCENE.look(0.9, 1e-6)), 0);
            ObjectEvidence evidence = last();
            assertThat(evidence.steps()).singleElement().satisfies(step -> {
                assertThat(step.kind()).isEqualTo(Kind.MISSED);
                assertThat(step.change()).isCloseTo(StrictMath.log(0.1), within(1e-14));
            });
            assertThat(evidence.probabilityOfDetection()).isEqualTo(0.9);
            assertThat(LogOdds.probability(evidence.after())).isCloseTo(r, within(1e-14));
        }
    }

    /** Survival 0.99 and misses, from 0.99 with probability of detection 0.5: closed form of the same recursion. */
    @Test
    void survivalIsAStepOfItsOwn() {
        double[] expected = {.960976566330032, .907244593506691, .815165586522519, .676465510701169, .503421248078205};
        FilterSettings mortal = FilterScene.oneKind(
                0, 5, -1 / StrictMath.log(0.99), 0, 0, 0, 0.7, 0.3, 0, 5, 20_000, 1000, 1000, 1_000_000, 1000, 1e-5,
                2_000_000);
        ObjectFilter filter = observed(mortal, 0.99);
        double before = 0.99;
        for (double after : expected) {
            filter.predict(1);
            filter.update(FilterScene.scan(0, Begun.SCENE.look(0.5, 1e-6)), 0);
            List<Step> steps = last().steps();
            assertThat(steps).extracting(Step::kind).containsExactly(Kind.SURVIVAL, Kind.MISSED);
            assertThat(steps.get(0).change())
                    .isCloseTo(LogOdds.of(0.99 * before) - LogOdds.of(before), within(1e-11));
            assertThat(steps.get(1).change()).isCloseTo(StrictMath.log(0.5), within(1e-14));
            before = after;
        }
    }

    /**
     * One object, any returns: r' = (1 - D) r / (1 - D r), D = pd (1 - sum l / clutter): Ristic et al. 2013 (from
     * memory).
     */
    @ParameterizedTest
    @CsvSource({
        "1, 0, 0.5", "10, 0, 0.900990099009901", "100, 0, 0.9890230515916575", "10, 2, 0.9159663865546218",
        "0.1, 0, 0.1596638655462185"
    })
    void aDetectionsStepIsTheLogarithmOfItsLikelihoodRatios(double ratio1, double ratio2, double expected) {
        double sigma2 = 4 + 225;
        double clutter = 1e-6;
        double peak = 1 / (2 * Math.PI * sigma2);
        List<Double> places = new ArrayList<>();
        for (double ratio : new double[] {ratio1, ratio2}) {
            if (ratio > 0) {
                places.add(Math.sqrt(-2 * sigma2 * StrictMath.log(ratio * clutter / peak)));
                places.add(0.0);
            }
        }
        ObjectFilter filter = observed(Begun.undisturbed(0, 20), 0.5);
        filter.update(FilterScene.scan(
                0, Begun.SCENE.look(0.9, clutter), places.stream().mapToDouble(p -> p).toArray()), 0);
        ObjectEvidence evidence = last();
        assertThat(evidence.steps().get(0).kind()).isEqualTo(Kind.DETECTED);
        assertThat(evidence.steps().get(0).change()).isCloseTo(LogOdds.of(expected), within(1e-11));
        assertThat(evidence.steps().stream().skip(1).mapToDouble(step -> Math.abs(step.change())).sum())
                .as("nobody competes").isLessThan(1e-12);
        ObjectEvidence.Gated first = evidence.gated().get(0);
        assertThat(first.likelihoodRatio()).isCloseTo(0.9 * ratio1, within(1e-9));
        assertThat(first.distanceSigmas()).isCloseTo(places.get(0) / Math.sqrt(sigma2), within(1e-9));
        assertThat(first.others()).isEmpty();
        // Of one object and one detection, the chance that it caused it is its share of all that may have happened.
        if (ratio2 == 0) {
            double caused = 0.5 * 0.9 * ratio1;
            assertThat(first.probability()).isCloseTo(caused / (caused + 1 - 0.5 * 0.9), within(1e-9));
        }
    }
}
