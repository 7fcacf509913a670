import { testFixtures } from '../support/test-fixtures';

testFixtures('typescript', 1, 3);
