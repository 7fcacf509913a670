import { testFixtures } from '../support/test-fixtures';

testFixtures('typescript', 0, 3);
