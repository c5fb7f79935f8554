package org.sweeptally.filter;

import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.DataInputStream;
import java.io.DataOutputStream;
import java.io.IOException;
import java.util.List;
import org.sweeptally.model.Gaussian;

/**
 * Filters that begin with a component of our choice and with nothing unseen, so that a recursion can be followed
 * alone.
 */
final class Begun {

    static final FilterScene SCENE = new FilterScene(20_000, 100, 1e6);

    private Begun() {}

    /** Nothing is born, nothing dies, nothing is recycled. */
    static FilterSettings undisturbed(double accelerationNoise, double gateSigmas) {
        return FilterScene.oneKind(
                accelerationNoise, 5, Double.POSITIVE_INFINITY, 0, 0, 0, 0.7, 0.3, 0, gateSigmas, 20_000, 1000, 1000,
                1_000_000, 1000, 1e-5, 2_000_000);
    }

    /** A filter with one component; log-odds may be infinite for an object that certainly exists. */
    static ObjectFilter with(FilterSettings settings, Gaussian density, double logOdds) {
        Identity identity = new Identity("mast", -1_000_000, 0, 0);
        Component component = new Component(
                new ObjectHistory(identity, 0, 0, false, null, 0), Bank.of(density.copy()), Detectability.UNKNOWN, logOdds, false, List.of());
        Counters counters = new Counters();
        Unseen unseen = new Unseen(settings, new Modes(settings.profiles()), SCENE.core(), SCENE.apronMetres(), counters);
        try {
            ByteArrayOutputStream bytes = new ByteArrayOutputStream();
            FilterState.write(new DataOutputStream(bytes), List.of(component), unseen,
                    new ClutterMap(SCENE.core(), SCENE.apronMetres()), counters);
            return ObjectFilter.read(
                    new DataInputStream(new ByteArrayInputStream(bytes.toByteArray())), settings, SCENE.core(),
                    SCENE.apronMetres());
        } catch (IOException e) {
            throw new IllegalStateException("memory cannot be written to or read", e);
        }
    }
}
