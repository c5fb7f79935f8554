package org.sweeptally.filter;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.DataInputStream;
import java.io.DataOutputStream;
import java.io.IOException;
import java.util.ArrayList;
import java.util.List;
import org.ejml.data.DMatrix4;
import org.ejml.data.DMatrix4x4;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.sweeptally.model.Gaussian;
import org.sweeptally.model.Look;
import org.sweeptally.model.PositionMeasurement;

/** Existence, association and new objects against numbers from outside the project. Each check names its source. */
class OutsideChecksTest {

    private final FilterScene scene = new FilterScene(20_000, 100, 1e6);

    /** Missed again and again: Bayes' rule; Ristic, Vo, Vo and Farina 2013, IEEE TSP 61(13) (from memory). */
    @Test
    void missesLowerExistenceAsBayesSays() throws IOException {
        // Probability of detection 0.9, no deaths, from 1/2: 1/11, 1/101, 1/1001, ...
        double[] expected = {1.0 / 11, 1.0 / 101, 1.0 / 1001, 1.0 / 10001, 1.0 / 100001};
        ObjectFilter filter = with(settings(1e300, 0), component(0.5, 0, 0, 4));
        for (double r : expected) {
            filter.update(scan(look(0.9, 1e-6)), 0);
            assertThat(existence(filter)).isCloseTo(r, within(1e-14));
        }
    }

    /** Survival 0.99 and misses, from 0.99 with probability of detection 0.5: closed form of the same recursion. */
    @Test
    void survivalAndMissesTogether() throws IOException {
        double[] expected = {
            .960976566330032, .907244593506691, .815165586522519, .676465510701169, .503421248078205, .331901127262649,
            .196588847788146, .107801835807056, .056369914982602, .0287040398376132
        };
        ObjectFilter filter = with(settings(-1 / StrictMath.log(0.99), 0), component(0.99, 0, 0, 4));
        for (double r : expected) {
            filter.predict(1);
            filter.update(scan(look(0.5, 1e-6)), 0);
            assertThat(existence(filter)).isCloseTo(r, within(1e-13));
        }
    }

    /** Scans until existence has fallen below a threshold: exact integers of the same recursion. */
    @ParameterizedTest
    @CsvSource({
        "0.99, 0.9, 1e-3, 5", "0.999, 0.9, 1e-3, 5", "0.99, 0.5, 0.1, 9", "0.99, 0.5, 1e-3, 15", "0.9, 0.3, 0.1, 12",
        "0.5, 0.9, 1e-4, 4", "0.99, 0.98, 1e-3, 3"
    })
    void anObjectIsDroppedAfterSoManyMisses(double r0, double pd, double threshold, int scans) throws IOException {
        ObjectFilter filter = with(settings(-1 / StrictMath.log(0.99), 0), component(r0, 0, 0, 4));
        int needed = 0;
        do {
            filter.predict(1);
            filter.update(scan(look(pd, 1e-6)), 0);
            needed++;
        } while (existence(filter) >= threshold);
        assertThat(needed).isEqualTo(scans);
    }

    /**
     * One object, any returns: r' = (1 - D) r / (1 - D r), D = pd (1 - sum l / clutter): Ristic et al. 2013 (from
     * memory).
     */
    @ParameterizedTest
    @CsvSource({
        "0, 0, 0.09090909090909091", "1, 0, 0.5", "10, 0, 0.900990099009901", "100, 0, 0.9890230515916575",
        "10, 2, 0.9159663865546218", "0.1, 0, 0.1596638655462185"
    })
    void returnsRaiseExistenceByTheirLikelihoodRatio(double ratio1, double ratio2, double expected) throws IOException {
        double sigma2 = 4 + 225;
        double clutter = 1e-6;
        double peak = 1 / (2 * Math.PI * sigma2);
        List<Double> places = new ArrayList<>();
        for (double ratio : new double[] {ratio1, ratio2}) {
            if (ratio > 0) {
                // Where the likelihood is that many times the clutter.
                places.add(Math.sqrt(-2 * sigma2 * StrictMath.log(ratio * clutter / peak)));
                places.add(0.0);
            }
        }
        FilterSettings wideGate = gated(settings(1e300, 0), 20);
        ObjectFilter filter = with(wideGate, component(0.5, 0, 0, 4));
        filter.update(FilterScene.scan(0, look(0.9, clutter), places.stream().mapToDouble(p -> p).toArray()), 0);
        assertThat(existence(filter)).isCloseTo(expected, within(1e-12));
    }

    /**
     * A whole scan by hand (enumerated; the update is that of Williams 2015, IEEE TAES 51(3)): two objects (0.8, at 0,
     * variance 4) and (0.6, at 5, variance 4), measurement variance 1, probability of detection 0.9, clutter 0.02 and
     * unseen 0.005 per metre, measurements 1, 4 and 20, all along one axis. The other axis is the same for everything,
     * so that it scales likelihoods, clutter and unseen alike.
     */
    @Test
    void aWholeScanByHand() throws IOException {
        double across = 1 / Math.sqrt(2 * Math.PI * (4 + 1));
        FilterSettings settings = gated(settings(1e300, 0.005 * across), 20);
        ObjectFilter filter = with(settings, component(0.8, 0, 0, 4), component(0.6, 5, 1, 4));
        List<Observation> observations = new ArrayList<>();
        for (double z : new double[] {1, 4, 20}) {
            observations.add(new Observation(PositionMeasurement.at(z, 0, 1), 0, observations.size(), null, null));
        }
        filter.update(new Scan("mast", 0, look(0.9, 0.02 * across), observations), 0);

        List<Component> after = filter.components();
        assertThat(after.get(0).existence()).isCloseTo(0.95572579202882, within(1e-10));
        assertThat(after.get(0).density().east()).isCloseTo(0.93851750055121, within(1e-10));
        assertThat(after.get(0).density().covariance.a11).isCloseTo(1.219988211198, within(1e-10));
        assertThat(after.get(1).existence()).isCloseTo(0.88806921589571, within(1e-10));
        assertThat(after.get(1).density().east()).isCloseTo(4.0830022107424, within(1e-10));
        assertThat(after.get(1).density().covariance.a11).isCloseTo(1.1760033920137, within(1e-10));
        // The third measurement begins an object, 9/49 but for a trifle; the first two are recycled as terms.
        assertThat(after.get(2).existence()).isCloseTo(0.18367346935356, within(1e-10));
        assertThat(after).hasSize(3);
        double recycled = .01362091850625 + .021406400628278;
        double components = after.stream().mapToDouble(Component::existence).sum();
        // Marginalising keeps the intensity: both means are 2.0624957964126.
        assertThat(components + recycled).isCloseTo(2.0624957964126, within(1e-10));
        ObjectFilter emptyScan = with(settings);
        emptyScan.update(scan(look(0.9, 0.02 * across)), 0);
        assertThat(filter.expectedUnseen() - emptyScan.expectedUnseen()).isCloseTo(recycled, within(1e-9));
        assertThat(after.get(0).used()).extracting(Component.Use::index).containsExactly(0, 1);
        assertThat(after.get(0).used().get(0).probability()).isCloseTo(.87695256947579 / 0.95572579202882, within(1e-10));
    }

    /** Existence of a new object, e / (clutter + e): Williams 2015 (from memory); uniform unseen intensity. */
    @ParameterizedTest
    @CsvSource({
        "1e-6, 1e-5, 0.9, 0.0825688073394495", "1e-5, 1e-5, 0.9, 0.473684210526316", "5e-7, 2.5e-6, 0.98, 0.163879598662207",
        "1e-8, 1e-5, 0.5, 0.000499750124937531"
    })
    void aNewObjectOutOfAUniformUnseenPart(double unseen, double clutter, double pd, double expected) {
        FilterSettings settings = settings(1e300, unseen);
        Unseen part = new Unseen(
                settings, new Modes(settings.profiles()), scene.core(), scene.apronMetres(), new Counters());
        Scan scan = FilterScene.scan(0, look(pd, clutter), 120, -340);
        double e = part.evidence(scan, 0, new DetectionIndex(scan.observations())).total(0);
        assertThat(e / (clutter + e)).isCloseTo(expected, within(1e-12));
    }

    /**
     * A Gaussian unseen intensity: weight 0.05, P = 150^2 I, R = 100 I, pd 0.9, clutter 2.5e-6 (quadrature agrees to
     * 1e-9).
     */
    @ParameterizedTest
    @CsvSource({
        "0, 0, 3.169014353599687e-7", "150, 0, 1.9263615173175568e-7", "300, 300, 5.9078e-9", "600, 0, 1.1013e-10"
    })
    void aNewObjectOutOfAGaussianTerm(double east, double north, double expected) {
        UnseenEvidence evidence = evidence(east, north, term(0.05, 0, 150));
        assertThat(evidence.total(0)).isCloseTo(expected, within(1e-4 * expected));
    }

    /**
     * Two terms, (0.02, N(0, 100^2 I)) and (0.03, N((200, 0), 50^2 I)), seen at (120, 30): weights and moments of the
     * mixture.
     */
    @Test
    void aNewObjectOutOfTwoTerms() {
        UnseenTerm first = term(0.02, 0, 100);
        UnseenTerm second = term(0.03, 200, 50);
        UnseenEvidence evidence = evidence(120, 30, first, second);
        assertThat(evidence.total(0)).isCloseTo(5.389937310919304e-7, within(1e-16));
        assertThat(evidence.value(0) / evidence.total(0)).isCloseTo(.24674123, within(1e-8));
        Unseen part = unseen(first, second);
        Gaussian density = part.firstSeen(scanAt(120, 30), evidence, 0).overall();
        assertThat(density.east()).isCloseTo(122.02456139, within(1e-7));
        assertThat(density.north()).isCloseTo(29.05756579, within(1e-7));
        assertThat(density.covariance.a11).isCloseTo(100.23945420386794, within(1e-8));
        assertThat(density.covariance.a12).isCloseTo(-.6791989744521725, within(1e-8));
        assertThat(density.covariance.a22).isCloseTo(96.99499886469665, within(1e-8));
    }

    /** Extremes that must give numbers: no clutter, certain objects that are missed, sensors that see nothing. */
    @Test
    void extremesGiveNumbers() throws IOException {
        ObjectFilter noClutter = with(settings(1e300, 0), component(0.5, 0, 0, 4));
        noClutter.update(FilterScene.scan(0, look(0.9, 0), 1, 1), 0);
        assertThat(existence(noClutter)).isEqualTo(1);

        ObjectFilter muchClutter = with(settings(1e300, 0), component(0.5, 0, 0, 4));
        muchClutter.update(FilterScene.scan(0, look(0.9, 1e12), 1, 1), 0);
        assertThat(existence(muchClutter)).isCloseTo(1.0 / 11, within(1e-9));

        ObjectFilter certain = with(settings(1e300, 0), component(1, 0, 0, 4));
        certain.update(scan(look(0.9, 1e-6)), 0);
        assertThat(existence(certain)).isEqualTo(1);

        ObjectFilter blind = with(settings(1e300, 0), component(0.5, 0, 0, 4));
        blind.update(scan(look(0, 1e-6)), 0);
        assertThat(existence(blind)).isEqualTo(0.5);

        ObjectFilter perfect = with(settings(1e300, 0), component(0.5, 0, 0, 4));
        perfect.update(scan(look(1, 1e-6)), 0);
        assertThat(existence(perfect)).isZero();

        ObjectFilter contradicted = with(settings(1e300, 0), component(1, 0, 0, 4));
        contradicted.update(scan(look(1, 1e-6)), 0);
        assertThat(existence(contradicted)).isNotNaN();
    }

    private Look look(double pd, double clutter) {
        return scene.look(pd, clutter);
    }

    private static Scan scan(Look look) {
        return FilterScene.scan(0, look);
    }

    private Scan scanAt(double east, double north) {
        PositionMeasurement z = PositionMeasurement.at(east, north, 10);
        return new Scan("mast", 0, look(0.9, 2.5e-6), List.of(new Observation(z, 0, 0, null, null)));
    }

    private UnseenEvidence evidence(double east, double north, UnseenTerm... terms) {
        Scan scan = scanAt(east, north);
        return unseen(terms).evidence(scan, 0, new DetectionIndex(scan.observations()));
    }

    private Unseen unseen(UnseenTerm... terms) {
        FilterSettings settings = gated(settings(1e300, 0), 20);
        Modes modes = new Modes(settings.profiles());
        Unseen part = new Unseen(settings, modes, scene.core(), scene.apronMetres(), new Counters());
        part.terms().addAll(List.of(terms));
        return part;
    }

    private static UnseenTerm term(double weight, double east, double sigma) {
        Gaussian density = Gaussian.atRest(east, 0, sigma * sigma, 0, sigma * sigma, 5);
        return new UnseenTerm(weight, Bank.of(density), Detectability.UNKNOWN, history((int) sigma));
    }

    /** Nothing is recycled before it is as good as gone, so that existence can be followed all the way down. */
    private static FilterSettings settings(double lifetime, double unseen) {
        double recycling = unseen > 0.00001 ? 0.1 : 1e-9;
        return FilterScene.oneKind(
                0.01, 5, lifetime, 0, 0, unseen, 0.7, 0.3, recycling, 5, 500, 100, 100, 1_000_000, 1000, 1e-5, 2_000_000);
    }

    private static FilterSettings gated(FilterSettings s, double gate) {
        return new FilterSettings(
                s.profiles(), s.birthsPerSquareMetrePerSecond(),
                s.outsidePerSquareMetre(), s.initialPerSquareMetre(), s.confirming(), s.ending(), s.recyclingBelow(), gate,
                s.unseenCellMetres(), s.components(), s.unseenTerms(), s.exactAssociationSteps(), s.propagationSweeps(), s.leastTermWeight(), s.gatedPairs());
    }

    private static Component component(double existence, double east, int number, double variance) {
        Gaussian density = new Gaussian(
                new DMatrix4(east, 0, 0, 0),
                new DMatrix4x4(variance, 0, 0, 0, 0, variance, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1));
        return new Component(
                history(number), Bank.of(density), Detectability.UNKNOWN, LogOdds.of(existence), false, List.of());
    }

    private static ObjectHistory history(int number) {
        return new ObjectHistory(new Identity("mast", -1_000_000, 0, number), 0, 0, false, null, 0);
    }

    /** A filter that begins with these components. */
    private ObjectFilter with(FilterSettings settings, Component... components) throws IOException {
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        Counters counters = new Counters();
        Unseen unseen = new Unseen(settings, new Modes(settings.profiles()), scene.core(), scene.apronMetres(), counters);
        FilterState.write(new DataOutputStream(bytes), List.of(components), unseen,
                new ClutterMap(scene.core(), scene.apronMetres()), counters);
        DataInputStream in = new DataInputStream(new ByteArrayInputStream(bytes.toByteArray()));
        return ObjectFilter.read(in, settings, scene.core(), scene.apronMetres());
    }

    /** Of the only component; 0 once it is gone. */
    private static double existence(ObjectFilter filter) {
        return filter.components().isEmpty() ? 0 : filter.components().get(0).existence();
    }
}
