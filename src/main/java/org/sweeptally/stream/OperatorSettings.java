package org.sweeptally.stream;

import java.nio.file.Path;
import org.sweeptally.site.Site;

/**
 * What an operator runs on.
 *
 * @param stateFolder folder for its stores; the same after a restart, or the restart takes longer
 */
public record OperatorSettings(Site site, TopicNames topics, ClientSettings clients, Path stateFolder) {}
